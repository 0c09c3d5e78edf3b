import { expect, test } from 'vitest';
import { runLaboratory, testInput } from './runningLaboratory.ts';

test('GET /api/v1/tests/:id/report.pdf answers what the renderer makes of the sheet', async () => {
  const asked: string[] = [];
  const laboratory = await runLaboratory({
    report: async (sheet) => {
      asked.push(sheet.test.id);
      return new TextEncoder().encode('%PDF-1.7');
    },
  });
  try {
    const { body } = await laboratory.ask('POST', '/api/v1/tests', testInput({ specimenId: 'A/1 "x"' }));
    const { status, headers, text } = await laboratory.ask('GET', `/api/v1/tests/${body.id}/report.pdf`);
    expect({ status, text }).toEqual({ status: 200, text: '%PDF-1.7' });
    expect(headers.get('content-type')).toBe('application/pdf');
    expect(headers.get('content-disposition')).toBe('inline; filename="A_1_x_.pdf"');
    expect(asked).toEqual([body.id]);
    expect(await laboratory.ask('GET', '/api/v1/tests/nowhere/report.pdf')).toMatchObject({
      status: 404,
      body: { code: 'not-found' },
    });
  } finally {
    await laboratory.stop();
  }
});

test('a program without reports says so', async () => {
  const laboratory = await runLaboratory();
  try {
    const { body } = await laboratory.ask('POST', '/api/v1/tests', testInput());
    expect(await laboratory.ask('GET', `/api/v1/tests/${body.id}/report.pdf`)).toMatchObject({
      status: 503,
      body: { code: 'busy', detail: expect.stringContaining('reports') },
    });
  } finally {
    await laboratory.stop();
  }
});

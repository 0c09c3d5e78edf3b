import { getDocument } from 'pdfjs-dist/legacy/build/pdf.mjs';
import { describe, expect, test } from 'vitest';
import type { Reading } from '../../src/records/reading.ts';
import type { Test } from '../../src/records/test.ts';
import { renderReport } from '../../src/report/node/render.ts';
import type { ReportedTest } from '../../src/report/summary.ts';
import { assessTest } from '../../src/verdict/assessTest.ts';
import { testInput } from '../server/runningLaboratory.ts';

const byInstrument = (planeAngleDeg: number): Reading => ({
  id: 'r1',
  testId: 't1',
  method: 'instrument',
  engineVersion: null,
  photoSha256: null,
  instrument: 'vernier bevel protractor',
  operator: 'bench 1',
  remarks: null,
  createdAt: '2026-03-02T10:00:00.000Z',
  setAside: false,
  result: {
    outcome: 'by-instrument',
    planeAngleDeg,
    expandedUncertaintyDeg: 2,
    coverageFactor: 2,
    hand: planeAngleDeg > 0 ? 'left' : 'right',
    shape: 'helix',
    planeTiltDeg: null,
    segments: [{ planeAngleDeg, share: 1 }],
  },
});

function reported(
  fields: Parameters<typeof testInput>[0] = {},
  readings: readonly Reading[] = [byInstrument(44)],
): ReportedTest {
  const test: Test = {
    ...testInput(fields),
    id: 't1',
    version: 1,
    createdAt: '2026-03-02T09:00:00.000Z',
    updatedAt: '2026-03-02T09:00:00.000Z',
  };
  return { test, readings, assessment: assessTest(test, readings) };
}

const MADE_AT = new Date('2026-03-03T08:00:00Z');
const render = (tests: readonly ReportedTest[], format: 'pdf' | 'html' | 'json' = 'pdf') =>
  renderReport({
    tests,
    format,
    version: '0.0.0',
    madeAt: MADE_AT,
    photoPath: async () => {
      throw new Error('there is no photo');
    },
  });

async function pagesOf(pdf: Uint8Array): Promise<string[]> {
  const document = await getDocument({ data: Uint8Array.from(pdf), useSystemFonts: false }).promise;
  const pages: string[] = [];
  for (let n = 1; n <= document.numPages; n++) {
    const { items } = await (await document.getPage(n)).getTextContent();
    pages.push(items.map((item) => ('str' in item ? item.str : '')).join(' '));
  }
  return pages;
}

describe('the PDF of a test', () => {
  test('is one page with the numbers, the rule and the cautions as text', async () => {
    const pages = await pagesOf(await render([reported()]));
    expect(pages).toHaveLength(1);
    const [text = ''] = pages;
    // 16 T/(π d³) for 85 N·m and 12 mm.
    for (const expected of [
      'T-001',
      '250.5 MPa',
      '44.0° ± 2.0° (k = 2)',
      'Normal stress, tension plane',
      'Declared rule',
      'θ',
      'σn',
      'authorised person',
    ]) {
      expect(text).toContain(expected);
    }
  });

  test('declares PDF/A-2b and is tagged', async () => {
    const pdf = Buffer.from(await render([reported()])).toString('latin1');
    expect(pdf).toMatch(/pdfaid:part>2</);
    expect(pdf).toMatch(/pdfaid:conformance>B</);
    expect(pdf).toContain('/MarkInfo');
  });

  test('the same test and moment give the same bytes', async () => {
    const [a, b] = [await render([reported()]), await render([reported()])];
    expect(Buffer.from(a).equals(Buffer.from(b))).toBe(true);
  });

  test('one page a test', async () => {
    expect(await pagesOf(await render([reported(), reported({ specimenId: 'T-002' })]))).toHaveLength(2);
  });

  test('without torque, without reading', async () => {
    const [text = ''] = await pagesOf(await render([reported({ torqueMaxNm: null, torqueDirection: null }, [])]));
    expect(text).toContain('not recorded');
    expect(text).toContain('No statement');
  });
});

describe('what a user wrote stays text', () => {
  const hostile = '#let x = 1 <script>alert(1)</script> =cmd() *bold* _under_ $math$ @ref \\ "quoted" \u202e RTL 🔩';
  test.each(['pdf', 'html', 'json'] as const)('%s', async (format) => {
    const bytes = await render(
      [
        reported({
          specimenId: hostile.slice(0, 150),
          remarks: `${hostile} ${'long '.repeat(1500)}`,
          material: '<b>steel</b>',
        }),
      ],
      format,
    );
    if (format === 'pdf') {
      const text = (await pagesOf(bytes)).join(' ');
      expect(text).toContain('#let x = 1');
      expect(text).toContain('<script>');
    } else {
      const text = new TextDecoder().decode(bytes);
      if (format === 'html') {
        expect(text).not.toContain('<script>');
        expect(text).toContain('&lt;script&gt;');
        expect(text).toContain('&lt;b&gt;steel');
      } else {
        expect(JSON.parse(text).tests[0].test.material).toBe('<b>steel</b>');
      }
    }
  });
});

test('a report without a test is refused', async () => {
  await expect(render([])).rejects.toMatchObject({ code: 'missing-value' });
});

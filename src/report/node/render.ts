import { LabError } from '../../errors.ts';
import { overlayOf, type ReportedTest, summariseTest } from '../summary.ts';
import { htmlOf } from './html.ts';
import { type PrintedTest, pdfOf } from './pdf.ts';
import { printedPhoto } from './photoPicture.ts';

export const REPORT_FORMATS = ['pdf', 'html', 'json'] as const;
export type ReportFormat = (typeof REPORT_FORMATS)[number];

export interface RenderReport {
  /** At least one. */
  readonly tests: readonly ReportedTest[];
  readonly format: ReportFormat;
  /** Version of the program, printed. */
  readonly version: string;
  /** Moment printed; the same tests and moment give the same bytes. */
  readonly madeAt: Date;
  /** Where the bytes of a photo lie. */
  readonly photoPath: (sha256: string) => Promise<string>;
  readonly paper?: 'a4' | 'us-letter';
  /** Name of the laboratory, printed under the title. */
  readonly laboratory?: string | null;
}

/** The report of one or more tests as a document. @throws LabError `missing-value` without a test */
export async function renderReport(request: RenderReport): Promise<Uint8Array> {
  const { tests, version, madeAt, photoPath } = request;
  if (tests.length === 0) {
    throw new LabError('missing-value', 'a report must have at least one test, got none', { input: 'test' });
  }
  const printed: PrintedTest[] = [];
  for (const reported of tests) {
    const summary = summariseTest(reported, version);
    const { photo } = summary;
    const path = photo === null || request.format === 'json' ? null : await photoPath(photo.sha256).catch(() => null);
    printed.push({
      summary,
      photoJpeg: path === null || photo === null ? null : await printedPhoto(path, overlayOf(reported, photo.sha256)),
    });
  }
  switch (request.format) {
    case 'pdf':
      return pdfOf(printed, { paper: request.paper ?? 'a4', madeAt, laboratory: request.laboratory ?? null });
    case 'html':
      return new TextEncoder().encode(htmlOf(printed, madeAt));
    case 'json':
      return new TextEncoder().encode(
        `${JSON.stringify({ madeAt: madeAt.toISOString(), tests: tests.map((t, i) => ({ ...t, summary: { ...printed[i]?.summary, figureSvg: undefined } })) }, null, 2)}\n`,
      );
  }
}

import { join } from 'node:path';
import { NodeCompiler } from '@myriaddreamin/typst-ts-node-compiler';
import type { TestSummary } from '../summary.ts';
import { fontFolder } from './fonts.ts';
import { printableValue } from './printable.ts';

/** A summary with the printed photo beside it. */
export interface PrintedTest {
  readonly summary: TestSummary;
  readonly photoJpeg: Uint8Array | null;
}

export interface PdfOptions {
  readonly paper: 'a4' | 'us-letter';
  /** Moment printed and stored in the file; the same moment and tests give the same bytes. */
  readonly madeAt: Date;
  readonly laboratory: string | null;
}

const WORKSPACE = '/report';

/**
 * The template reads everything as data; what users wrote is text there and can never become markup.
 * Typst, PDF/A-2b, tagged.
 */
const TEMPLATE = `
#let report = json("data.json")
#set document(title: report.title, author: report.program, date: datetime(..report.date))
#set page(
  paper: report.paper,
  margin: (x: 16mm, top: 12mm, bottom: 14mm),
  footer: context [
    #set text(7.5pt, fill: rgb("#4b5b6b"))
    #grid(columns: (1fr, auto), [#report.program #sym.dot.c made #report.madeAt #sym.dot.c a proposal until accepted by an authorised person], [#counter(page).display("1 / 1", both: true)])
  ],
)
#set text(font: "DejaVu Sans", size: 8pt, lang: "en", hyphenate: true)
#set par(leading: 0.5em, spacing: 0.65em, justify: false)
#set table(stroke: none, inset: (x: 3pt, y: 1.8pt))
#show heading.where(level: 1): it => block(below: 3pt, text(14pt, weight: "bold", it.body))
#show heading.where(level: 2): it => block(above: 7pt, below: 2.5pt, text(9.2pt, weight: "bold", fill: rgb("#1d3a5f"), it.body))

#let facts(rows) = table(
  columns: (auto, 1fr),
  ..rows.map(r => (text(fill: rgb("#4b5b6b"), r.label), r.value)).flatten(),
)
#let muted(body) = text(7.6pt, fill: rgb("#4b5b6b"), body)

#for (i, t) in report.tests.enumerate() {
  if i > 0 { pagebreak() }
  heading(level: 1, t.title)
  if report.laboratory != none { muted(report.laboratory) }
  block(width: 100%, inset: 7pt, radius: 3pt, fill: rgb("#eef1f4"), stroke: (left: 3pt + rgb("#1d3a5f")))[
    #text(12pt, weight: "bold", t.headline) #h(6pt) #t.headlineDetail
    #if t.reason != none { linebreak(); t.reason }
  ]
  grid(
    columns: (1fr, 1fr), column-gutter: 8mm,
    [
      #heading(level: 2)[Specimen]
      #facts(t.specimen)
      #heading(level: 2)[Loads]
      #facts(t.loads)
      #heading(level: 2)[Measured break]
      #facts(t.reading)
    ],
    [
      #if t.photoFile != none {
        image(t.photoFile, width: 100%, alt: t.photo.caption)
        muted(t.photo.caption)
      }
      #if t.probabilities.len() > 0 {
        heading(level: 2)[Probability of each mode]
        table(columns: (1fr, auto), ..t.probabilities.map(p => (p.mode, p.probability)).flatten())
      }
    ],
  )
  grid(
    columns: (1.25fr, 1fr), column-gutter: 6mm,
    image(t.figureFile, width: 100%, alt: t.figureText),
    [
      #heading(level: 2)[Stresses]
      #facts(t.stresses)
      #heading(level: 2)[Predicted planes]
      #table(
        columns: (1fr, auto, auto, auto), align: (left, right, right, right),
        table.header(muted[plane], muted[θ], muted[σn], muted[τnt]),
        ..t.planes.map(p => (p.plane, p.angle, p.normal, p.shear)).flatten(),
      )
    ],
  )
  if t.evidence.len() > 0 {
    heading(level: 2)[Evidence]
    for e in t.evidence { block(spacing: 3pt)[*#e.sign:* #e.sentence] }
  }
  if t.notes.len() > 0 {
    heading(level: 2)[Assumed or missing]
    for n in t.notes { block(spacing: 3pt, n) }
  }
  if t.remarks != none {
    heading(level: 2)[Remarks]
    t.remarks
  }
  if t.budget.len() > 0 {
    heading(level: 2)[Uncertainty of the plane angle (standard uncertainties, GUM)]
    set text(7.2pt)
    table(
      columns: (auto, auto, auto, 1fr), align: (left, right, center, left), inset: (x: 3pt, y: 0.9pt),
      table.header(muted[component], muted[u], muted[type], muted[how it was found]),
      ..t.budget.map(b => (b.component, b.u, b.evaluation, b.explanation)).flatten(),
    )
  }
  if t.rule != none {
    block(above: 6pt)[#muted[*Declared rule.* #t.rule]]
  }
  heading(level: 2)[Cautions]
  set text(7.2pt)
  for c in t.cautions { block(spacing: 3pt)[– #c] }
  block(above: 9pt)[
    #grid(columns: (1fr, 1fr, 1fr), column-gutter: 6mm,
      ..("Reviewed by", "Date", "Signature").map(l => [#line(length: 100%, stroke: 0.5pt + rgb("#4b5b6b")) #muted(l)]))
  ]
}
`;

/** The moment as Typst's datetime takes it, UTC. */
const dateParts = (moment: Date) => ({
  year: moment.getUTCFullYear(),
  month: moment.getUTCMonth() + 1,
  day: moment.getUTCDate(),
  hour: moment.getUTCHours(),
  minute: moment.getUTCMinutes(),
  second: moment.getUTCSeconds(),
});

/** One page a test (more when a remark is long). PDF/A-2b, tagged, figures as vectors, text extractable. */
export function pdfOf(tests: readonly PrintedTest[], options: PdfOptions): Uint8Array {
  const compiler = NodeCompiler.create({ workspace: WORKSPACE, fontArgs: [{ fontPaths: [fontFolder()] }] });
  const file = (name: string) => join(WORKSPACE, name);
  const entries = tests.map(({ summary, photoJpeg }, i) => {
    const figureFile = `figure-${i}.svg`;
    compiler.mapShadow(file(figureFile), Buffer.from(summary.figureSvg));
    const photoFile = photoJpeg === null || summary.photo === null ? null : `photo-${i}.jpg`;
    if (photoFile !== null && photoJpeg !== null) compiler.mapShadow(file(photoFile), Buffer.from(photoJpeg));
    const { figureSvg: _, ...data } = summary;
    return { ...data, figureFile, photoFile };
  });
  const data = {
    title: tests.length === 1 ? (tests[0]?.summary.title ?? 'Failure modes') : `Failure modes of ${tests.length} tests`,
    program: tests[0]?.summary.program ?? 'Breakplane',
    paper: options.paper,
    date: dateParts(options.madeAt),
    madeAt: options.madeAt.toISOString().slice(0, 16).replace('T', ' '),
    laboratory: options.laboratory,
    tests: entries,
  };
  compiler.mapShadow(file('data.json'), Buffer.from(JSON.stringify(printableValue(data))));
  compiler.mapShadow(file('main.typ'), Buffer.from(TEMPLATE));
  const compiled = compiler.compile({ mainFilePath: file('main.typ') });
  if (compiled.result === null) {
    const why = compiled.takeError()?.shortDiagnostics ?? [];
    throw new Error(`the report could not be typeset: ${JSON.stringify(why)}`);
  }
  return compiler.pdf(compiled.result, {
    pdfStandard: 'a-2b',
    creationTimestamp: Math.floor(options.madeAt.getTime() / 1000),
  });
}

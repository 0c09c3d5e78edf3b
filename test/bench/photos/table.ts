import type { PhotoScore } from './score.ts';
import { type GroupFigures, summarize } from './summary.ts';

const fixed = (value: number, digits: number): string => (Number.isNaN(value) ? '-' : value.toFixed(digits));
const percent = (value: number): string => (Number.isNaN(value) ? '-' : `${(100 * value).toFixed(1)} %`);

type Column = readonly [title: string, cell: (figures: GroupFigures) => string];
const COLUMNS: readonly Column[] = [
  ['n', (f) => String(f.photos)],
  ['measured', (f) => percent(f.measuredShare)],
  ['median', (f) => fixed(f.medianErrorDeg, 2)],
  ['p90', (f) => fixed(f.p90ErrorDeg, 2)],
  ['RMS', (f) => fixed(f.rmsErrorDeg, 2)],
  ['>10°', (f) => String(f.errorsOver10Deg)],
  ['wrong hand', (f) => String(f.wrongHands)],
  ['right mode', (f) => percent(f.rightModeShare)],
  ['cover', (f) => percent(f.coverage)],
  ['median U', (f) => fixed(f.medianExpandedUncertaintyDeg, 2)],
  ['tilt err', (f) => fixed(f.medianTiltErrorDeg, 2)],
  ['segments', (f) => percent(f.segmentsFoundShare)],
  ['false alarms', (f) => (f.photosWithoutBreak === 0 ? '-' : `${f.falseAlarms} / ${f.photosWithoutBreak}`)],
  ['ms', (f) => fixed(f.medianMs, 0)],
];

/** Rows of cells as aligned text: first column to the left, the others to the right. */
export function alignedText(rows: readonly (readonly string[])[]): string {
  const widths = (rows[0] ?? []).map((_, column) => Math.max(...rows.map((row) => row[column]?.length ?? 0)));
  const line = (row: readonly string[]) =>
    row.map((cell, i) => (i === 0 ? cell.padEnd(widths[i] ?? 0) : cell.padStart(widths[i] ?? 0))).join('  ');
  return rows.map((row) => line(row).trimEnd()).join('\n');
}

const GROUPINGS: readonly (readonly [string, (score: PhotoScore) => string])[] = [
  ['view', (s) => s.view],
  ['kind', (s) => s.kind],
  ['view + kind', (s) => `${s.view} ${s.kind}`],
  ['material', (s) => s.material],
  ['background', (s) => s.background],
  ['light', (s) => s.light],
  ['section', (s) => s.section],
  ['width', (s) => widthClass(s.diameterPx)],
];

function widthClass(diameterPx: number | null): string {
  if (diameterPx === null) return '-';
  const limits = [80, 120, 250, 400];
  const next = limits.findIndex((limit) => diameterPx < limit);
  return next === 0 ? 'below 80 px' : next < 0 ? '400 px and more' : `${limits[next - 1]} to ${limits[next]} px`;
}

/** The whole table: all photos, then by view, kind, material, background, light, section and width. */
export function figuresTable(scores: readonly PhotoScore[]): string {
  const row = (title: string, group: readonly PhotoScore[]) => {
    const figures = summarize(group);
    return [title, ...COLUMNS.map(([, cell]) => cell(figures))];
  };
  const rows = [['', ...COLUMNS.map(([title]) => title)], row('all', scores)];
  for (const [name, keyOf] of GROUPINGS) {
    const keys = [...new Set(scores.map(keyOf))].sort();
    rows.push([name, ...COLUMNS.map(() => '')]);
    for (const key of keys) {
      rows.push(
        row(
          `  ${key}`,
          scores.filter((score) => keyOf(score) === key),
        ),
      );
    }
  }
  return alignedText(rows);
}

const degrees = (value: number | null): string => (value === null ? '-' : value.toFixed(2));

/** One line a photo: truth, result, error, uncertainty, reason. */
export function photoLines(scores: readonly PhotoScore[]): string {
  const header = [
    'photo',
    'view kind',
    'material',
    'background',
    'light',
    'px',
    'true',
    'measured',
    'error',
    'U',
    'tilt true',
    'tilt',
    'shape',
    'mode',
    'remark',
    'ms',
  ];
  const rows = scores.map((s) => [
    s.file,
    `${s.view} ${s.kind}`,
    s.material,
    s.background,
    s.light,
    s.diameterPx === null ? '-' : s.diameterPx.toFixed(0),
    degrees(s.trueDeg),
    degrees(s.planeAngleDeg),
    degrees(s.errorDeg),
    degrees(s.expandedUncertaintyDeg),
    degrees(s.trueTiltDeg),
    degrees(s.planeTiltDeg),
    s.shape ?? '-',
    s.mode ?? '-',
    remark(s),
    s.elapsedMs.toFixed(0),
  ]);
  return alignedText([header, ...rows]);
}

function remark(s: PhotoScore): string {
  return (
    [
      s.reason,
      s.falseAlarm ? 'FALSE ALARM' : null,
      s.wrongHand ? 'WRONG HAND' : null,
      s.rightMode === false ? 'WRONG MODE' : null,
      s.segmentsFound === false ? 'SEGMENTS' : null,
      s.covered === false ? 'outside U' : null,
    ]
      .filter((part) => part !== null)
      .join(', ') || '-'
  );
}

/** How bad a photo is, for the list of the worst: false alarms, then errors, then refusals of real breaks. */
export function badness(score: PhotoScore): number {
  if (score.falseAlarm) return 1000;
  const error = Math.max(Math.abs(score.errorDeg ?? 0), Math.abs(score.tiltErrorDeg ?? 0) / 3);
  const mistakes = (score.rightMode === false ? 45 : 0) + (score.segmentsFound === false ? 20 : 0);
  return error + mistakes + (score.kind !== 'none' && score.outcome === 'not-measured' ? 15 : 0);
}

import type { SectionGeometry } from '../records/geometry.ts';
import type { RowCells } from './rowCells.ts';

/** Sections a log can name: those its columns have dimensions for. */
type SectionName = Extract<SectionGeometry['section'], 'solid-round' | 'hollow-round'>;

/** Words for sections; folded to small letters without accents, spaces or hyphens. Common practice. */
const SECTION_WORDS: Readonly<Record<SectionName, readonly string[]>> = {
  'solid-round': [
    'solidround',
    'solid',
    'round',
    'roundsolid',
    'roundbar',
    'bar',
    'rod',
    'wire',
    'dowel',
    'circular',
    'solidcircular',
    'rund',
    'vollrund',
    'rundstab',
    'vollstab',
    'draht',
    'rond',
    'rondplein',
    'plein',
    'barre',
    'fil',
    'redondo',
    'macizo',
    'barra',
    'alambre',
    'tondo',
    'pieno',
    'filo',
    'macico',
    'arame',
    'pret',
    'stang',
    '实心',
    '圆棒',
    '丸棒',
  ],
  'hollow-round': [
    'hollowround',
    'hollow',
    'tube',
    'pipe',
    'tubular',
    'roundtube',
    'hollowcircular',
    'rohr',
    'rundrohr',
    'hohl',
    'hohlrund',
    'hohlprofil',
    'creux',
    'tubo',
    'hueco',
    'cavo',
    'oco',
    'rura',
    'ror',
    '空心',
    '管',
    '中空',
  ],
};

const BY_WORD = new Map<string, SectionName>(
  (Object.keys(SECTION_WORDS) as SectionName[]).flatMap((section) =>
    SECTION_WORDS[section].map((word): [string, SectionName] => [word, section]),
  ),
);

const fold = (text: string): string =>
  text
    .normalize('NFKD')
    .replace(/\p{M}/gu, '')
    .replaceAll('ø', 'o')
    .toLowerCase()
    .replace(/[\s_.-]+/g, '');

/** Section and dimensions of a row; without a section column a bore makes it a tube. Problems go to the row. */
export function geometryOfRow(row: RowCells): SectionGeometry | null {
  const problemsBefore = row.problems.length;
  const diameterMm = row.number('diameter_mm');
  const boreMm = row.number('bore_mm');
  const cellsRead = row.problems.length === problemsBefore;
  const word = row.text('section');
  const stated = word === null ? null : BY_WORD.get(fold(word));
  if (stated === undefined) {
    row.refuse('section', 'invalid-request', `section must be solid-round or hollow-round, got "${word}"`);
  }
  if (diameterMm === null) {
    if (cellsRead) row.refuse('diameter_mm', 'missing-value', 'diameter must be given, got an empty cell');
    return null;
  }
  if (stated === 'solid-round' && boreMm !== null && boreMm !== 0) {
    row.refuse(
      'bore_mm',
      'contradiction',
      `bore must be empty or 0 for a solid section, got ${row.original('bore_mm')}`,
    );
  }
  if (stated === 'hollow-round' && cellsRead && (boreMm === null || boreMm === 0)) {
    row.refuse('bore_mm', 'missing-value', 'bore must be given for a hollow section, got an empty cell or 0');
  }
  return boreMm === null || boreMm === 0
    ? { section: 'solid-round', diameterMm }
    : { section: 'hollow-round', diameterMm, boreMm };
}

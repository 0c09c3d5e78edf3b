import { CANONICAL_HEADERS, type ColumnName } from '../../src/log/columnNames.ts';
import type { HandMapping } from '../../src/log/columns.ts';
import { inspectLog } from '../../src/log/node/inspectLog.ts';
import type { LogSource } from '../../src/log/node/logSource.ts';
import { type LogDeclarations, planImport } from '../../src/log/node/planImport.ts';
import type { LaboratoryStore } from '../store/laboratoryStore.ts';
import { rememberedMapping } from './columnMapping.ts';

const ROWS_SHOWN = 10;

/** How a log would be read, with its first rows; nothing is kept. */
export interface LogPreview {
  readonly name: string;
  readonly encoding: string;
  readonly delimiter: string;
  readonly decimalMark: 'point' | 'comma' | 'mixed';
  readonly headerLine: number;
  readonly headers: readonly string[];
  readonly columns: readonly { readonly header: string; readonly column: ColumnName; readonly unit: string | null }[];
  readonly knownColumns: readonly ColumnName[];
  readonly rows: readonly (readonly string[])[];
  readonly remembered: boolean;
  readonly notes: readonly string[];
}

/**
 * @param byHand columns mapped by hand; null: as the laboratory mapped such a log before, or by their names alone
 * @throws LabError `not-a-log`, `unknown-unit`
 */
export async function previewLog(
  store: LaboratoryStore,
  source: LogSource,
  byHand: readonly HandMapping[] | null,
  declared: LogDeclarations,
): Promise<LogPreview> {
  const remembered = byHand === null ? await rememberedMapping(store, source) : null;
  const mapping = byHand ?? remembered ?? [];
  const inspection = await inspectLog(source, mapping);
  const plan = planImport(inspection, { ...declared, mapping });
  return {
    name: inspection.name,
    encoding: inspection.encoding,
    delimiter: inspection.delimiter,
    decimalMark: plan.reading.decimalMark,
    headerLine: inspection.headerLine,
    headers: inspection.headers,
    columns: plan.reading.columns,
    knownColumns: CANONICAL_HEADERS,
    rows: inspection.sampleRows.slice(0, ROWS_SHOWN),
    remembered: remembered !== null,
    notes: plan.notes,
  };
}

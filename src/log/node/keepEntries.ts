import { LabError } from '../../errors.ts';
import type { KeptLogEntry, LaboratoryRecords, LogEntry } from '../../records/laboratoryRecords.ts';
import type { Reading } from '../../records/reading.ts';

/** What became of one entry: kept, or refused by the store. */
export type KeptOrRefused = KeptLogEntry | LabError;

/** True when a test already has the angle the log states. */
export function hasSameReading(readings: readonly Reading[], reading: NonNullable<LogEntry['reading']>): boolean {
  const { result } = reading;
  if (result.outcome === 'not-measured') return false;
  return readings.some(
    (known) =>
      known.method === reading.method &&
      known.instrument === reading.instrument &&
      known.result.outcome === result.outcome &&
      known.result.planeAngleDeg === result.planeAngleDeg &&
      known.result.expandedUncertaintyDeg * result.coverageFactor ===
        result.expandedUncertaintyDeg * known.result.coverageFactor,
  );
}

async function keepOne(records: LaboratoryRecords, entry: LogEntry): Promise<KeptLogEntry> {
  const { outcome, test } = await records.upsertTest(entry.test);
  const { reading } = entry;
  if (!reading) return { outcome, testId: test.id, readingAdded: false };
  const known = outcome === 'stored' ? [] : await records.readingsOf(test.id);
  if (hasSameReading(known, reading)) return { outcome, testId: test.id, readingAdded: false };
  await records.addReading({ ...reading, testId: test.id });
  return { outcome, testId: test.id, readingAdded: true };
}

async function keepEach(records: LaboratoryRecords, entries: readonly LogEntry[]): Promise<KeptOrRefused[]> {
  const kept: KeptOrRefused[] = [];
  for (const entry of entries) {
    try {
      kept.push(await keepOne(records, entry));
    } catch (error) {
      if (!(error instanceof LabError)) throw error;
      kept.push(error);
    }
  }
  return kept;
}

/**
 * Keeps the entries of a log, in one transaction where the store can; an entry the store refuses costs only itself.
 * In a dry run nothing is kept; a store that cannot try it out (or none) answers as if every entry were new.
 */
export async function keepEntries(
  records: LaboratoryRecords | null,
  entries: readonly LogEntry[],
  dryRun: boolean,
): Promise<KeptOrRefused[]> {
  if (entries.length === 0) return [];
  if (records?.upsertLogEntries) {
    try {
      return await records.upsertLogEntries(entries, { dryRun });
    } catch (error) {
      if (!(error instanceof LabError) || dryRun) throw error;
      return keepEach(records, entries);
    }
  }
  if (dryRun || !records) {
    return entries.map(({ reading }) => ({ outcome: 'stored', testId: '', readingAdded: reading !== null }));
  }
  return keepEach(records, entries);
}

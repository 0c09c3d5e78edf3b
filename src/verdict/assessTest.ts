import type { Reading } from '../records/reading.ts';
import type { TestInput } from '../records/test.ts';
import { assessReading, type OtherReadingInput } from './assessReading.ts';
import type { Assessment, DecisionRule } from './model.ts';

export interface AssessOptions {
  /** Parts of the laboratory's own decision rule; the rest is `DEFAULT_DECISION_RULE`. */
  readonly rule?: Partial<DecisionRule>;
}

type Measured = Exclude<Reading['result'], { outcome: 'not-measured' }>;
type MeasuredReading = Reading & { readonly result: Measured };

const isMeasured = (reading: Reading): reading is MeasuredReading => reading.result.outcome !== 'not-measured';

const newestFirst = (a: Reading, b: Reading): number =>
  a.createdAt < b.createdAt ? 1 : a.createdAt > b.createdAt ? -1 : a.id < b.id ? 1 : -1;

/**
 * Everything that follows from a test and its readings. The statement rests on the newest reading by hand
 * (on the photo or with an instrument), else on the newest automatic one; readings set aside are left out,
 * the others enter as evidence. Pure.
 * @throws LabError for loads, dimensions or a rule that cannot be
 */
export function assessTest(test: TestInput, readings: readonly Reading[], options: AssessOptions = {}): Assessment {
  const inUse = readings.filter((reading) => !reading.setAside);
  const measured = inUse.filter(isMeasured).sort(newestFirst);
  const governing = measured.find((reading) => reading.method !== 'photo-automatic') ?? measured[0];
  const refused = inUse.length - measured.length;
  const notes = refused > 0 ? [refusedNote(refused)] : [];
  if (!governing) return assessReading(test, null, { ...options, notes });
  const others = measured
    .filter((reading) => reading.id !== governing.id)
    .map((reading) => otherReading(reading, governing));
  return assessReading(test, governing.result, { ...options, readingId: governing.id, others, notes });
}

const METHOD_NAMES = {
  'photo-automatic': 'the automatic reading',
  'photo-hand': 'the reading by hand on the photo',
  instrument: 'the reading with an instrument',
} as const;

function otherReading(reading: MeasuredReading, governing: MeasuredReading): OtherReadingInput {
  return {
    reading: reading.result,
    name: METHOD_NAMES[reading.method],
    samePhoto: reading.photoSha256 !== null && reading.photoSha256 === governing.photoSha256,
  };
}

const refusedNote = (count: number): string =>
  count === 1 ? 'One photo did not allow a measurement.' : `${count} photos did not allow a measurement.`;

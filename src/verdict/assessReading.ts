import { LabError } from '../errors.ts';
import type { TestLoads } from '../mechanics/surfaceStress.ts';
import type { PlaneReading } from '../records/reading.ts';
import { evidenceOf, type OtherReading } from './evidence.ts';
import { type Reason, stateFailureMode } from './failureMode.ts';
import { type Assessment, DEFAULT_DECISION_RULE, type DecisionRule } from './model.ts';
import { stressSummaryOf } from './stressSummary.ts';

export type OtherReadingInput = OtherReading;

export interface AssessReadingOptions {
  readonly rule?: Partial<DecisionRule>;
  readonly readingId?: string;
  readonly others?: readonly OtherReadingInput[];
  readonly notes?: readonly string[];
  /** Why the break cannot be attributed, where the laboratory knows it. */
  readonly notAttributable?: Reason | null;
}

/**
 * Loads and one reading, assessed: stress, planes, failure mode and evidence. `assessTest` chooses the
 * reading of a stored test; the command line and the page's live view call this one directly.
 * @param reading null when there is none to rest on: the statement is then null
 */
export function assessReading(
  loads: TestLoads,
  reading: PlaneReading | null,
  options: AssessReadingOptions = {},
): Assessment {
  const summary = stressSummaryOf(loads);
  const rule = decisionRule(options.rule);
  const notes = [...summary.notes, ...(options.notes ?? [])];
  if (!reading || summary.planes.length === 0) {
    return { ...summary, notes, readingId: options.readingId ?? null, statement: null };
  }
  const statement = stateFailureMode(summary.planes, reading, rule, options.notAttributable);
  const evidence = evidenceOf({
    statement,
    reading,
    torqueDirection: loads.torqueDirection ?? null,
    others: options.others ?? [],
  });
  return { ...summary, notes, readingId: options.readingId ?? null, statement: { ...statement, evidence } };
}

/** The default rule with the laboratory's own parts. @throws LabError `out-of-range` */
export function decisionRule(parts: Partial<DecisionRule> = {}): DecisionRule {
  const rule = { ...DEFAULT_DECISION_RULE, ...parts };
  requireShare('minimumProbability', rule.minimumProbability, 0.5, 1);
  requireShare('minimumSegmentShare', rule.minimumSegmentShare, 0, 0.5);
  return rule;
}

function requireShare(input: string, value: number, lowest: number, highest: number): void {
  if (value >= lowest && value <= highest) return;
  throw new LabError('out-of-range', `${input} must be ${lowest} to ${highest}, got ${value}`, { input, value });
}

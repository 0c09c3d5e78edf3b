import { LabError } from '../../src/errors.ts';
import type { Reading } from '../../src/records/reading.ts';
import type { TestInput } from '../../src/records/test.ts';
import { assessTest } from '../../src/verdict/assessTest.ts';
import type { Assessment, FailureMode } from '../../src/verdict/model.ts';

/**
 * Raised whenever the rule, the evidence or this file changes what a test is said to be: the store then makes the derived
 * columns of all tests anew.
 */
export const STANDING_REVISION = '1';

/** Something odd about a test that a person should look at. */
export interface Flag {
  readonly code: string;
  readonly sentence: string;
}

/** What a list shows of a test beside its fields. */
export interface Standing {
  readonly mode: FailureMode | null;
  readonly probability: number | null;
  readonly planeAngleDeg: number | null;
  readonly expandedUncertaintyDeg: number | null;
  readonly flags: readonly Flag[];
}

const NOTHING = { mode: null, probability: null, planeAngleDeg: null, expandedUncertaintyDeg: null };

function photoFlags(readings: readonly Reading[]): Flag[] {
  const measured = new Set(
    readings.flatMap((r) => (r.result.outcome === 'not-measured' || r.photoSha256 === null ? [] : [r.photoSha256])),
  );
  const refused = readings.filter(
    (r) => r.result.outcome === 'not-measured' && r.photoSha256 !== null && !measured.has(r.photoSha256),
  );
  const [first] = refused;
  if (first?.result.outcome !== 'not-measured') return [];
  return [{ code: 'photo-not-measured', sentence: `A photo was not measured: ${first.result.reason.message}` }];
}

/** The assessment of a test and its readings; null with a flag when its fields contradict each other. */
function assess(test: TestInput, readings: readonly Reading[]): { assessment: Assessment | null; flags: Flag[] } {
  try {
    return { assessment: assessTest(test, readings), flags: [] };
  } catch (error) {
    if (!(error instanceof LabError)) throw error;
    return { assessment: null, flags: [{ code: 'not-assessable', sentence: error.message }] };
  }
}

/** What a list says about a test: mode, angle, and everything odd. */
export function standingOf(test: TestInput, readings: readonly Reading[]): Standing {
  const { assessment, flags } = assess(test, readings);
  const inUse = readings.filter((reading) => !reading.setAside);
  const governing = inUse.find((reading) => reading.id === assessment?.readingId);
  const odd = (assessment?.statement?.evidence ?? [])
    .filter((evidence) => evidence.sign === 'contradicts')
    .map(({ code, sentence }) => ({ code, sentence }));
  const all = [...flags, ...odd, ...photoFlags(inUse)];
  const { statement } = assessment ?? {};
  if (!governing || governing.result.outcome === 'not-measured') return { ...NOTHING, flags: all };
  const { planeAngleDeg, expandedUncertaintyDeg } = governing.result;
  return {
    mode: statement?.mode ?? null,
    probability: statement?.probability ?? null,
    planeAngleDeg,
    expandedUncertaintyDeg,
    flags: all,
  };
}

/** The derived columns of a test. */
export function standingColumns(test: TestInput, readings: readonly Reading[]) {
  const standing = standingOf(test, readings);
  return {
    mode: standing.mode,
    probability: standing.probability,
    plane_angle_deg: standing.planeAngleDeg,
    expanded_uncertainty_deg: standing.expandedUncertaintyDeg,
    flags: JSON.stringify(standing.flags),
    flag_count: standing.flags.length,
    reading_count: readings.length,
    assessed_with: STANDING_REVISION,
  };
}

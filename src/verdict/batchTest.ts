import type { Reading } from '../records/reading.ts';
import type { Test } from '../records/test.ts';
import type { BatchTest } from '../statistics/batchTest.ts';
import type { Assessment } from './model.ts';

/** What the statistics of a batch look at, from a test, its readings and what was said of it. Pure. */
export function batchTestOf(test: Test, readings: readonly Reading[], assessment: Assessment): BatchTest {
  const { statement } = assessment;
  const result = readings.find((reading) => reading.id === assessment.readingId)?.result;
  const measured = result && result.outcome !== 'not-measured' ? result : null;
  const flat = statement?.comparedQuantity === 'planeTilt';
  return {
    id: test.id,
    specimenId: test.specimenId,
    testDate: test.testDate,
    material: test.material,
    heat: test.heat,
    section: test.geometry.section,
    operator: test.operator,
    torqueDirection: test.torqueDirection,
    mode: statement?.mode ?? null,
    planeAngleDeg: measured && !flat && measured.shape !== 'mixed' ? measured.planeAngleDeg : null,
    planeTiltDeg: measured && flat ? measured.planeTiltDeg : null,
    strengthMPa: assessment.stress?.elastic.shearStressMPa ?? null,
    leftOut: statement?.mode === 'not-attributable' ? (statement.reason?.message ?? 'not attributable') : null,
  };
}

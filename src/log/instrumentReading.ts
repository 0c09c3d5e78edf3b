import { handOfPlaneAngle, wrapPlaneAngleDeg } from '../angle.ts';
import type { LogEntry } from '../records/laboratoryRecords.ts';
import type { RowCells } from './rowCells.ts';

/** GUM: expanded uncertainty U = k u. */
const COVERAGE_FACTOR = 2;
/** Beyond it no plane is told from another one. */
const LARGEST_STANDARD_UNCERTAINTY_DEG = 45;

/**
 * The plane angle a row states, as a reading with an instrument; null when it states none. Problems go to the row.
 * @param declaredUncertaintyDeg standard uncertainty for angles without one of their own, degrees
 */
export function instrumentReading(row: RowCells, declaredUncertaintyDeg: number | null): LogEntry['reading'] {
  const problemsBefore = row.problems.length;
  const angleDeg = row.number('angle_deg');
  const statedUncertaintyDeg = row.number('angle_u_deg');
  if (row.problems.length > problemsBefore || angleDeg === null) return null;
  const standardUncertaintyDeg = statedUncertaintyDeg ?? declaredUncertaintyDeg;
  if (!(Math.abs(angleDeg) <= 180)) {
    row.refuse(
      'angle_deg',
      'out-of-range',
      `plane angle must be from -180 to 180 deg, got ${row.original('angle_deg')}`,
    );
    return null;
  }
  if (standardUncertaintyDeg === null) {
    row.refuse(
      'angle_u_deg',
      'missing-value',
      'a plane angle must come with its standard uncertainty in deg, got an empty cell; fill it in, or declare one for the whole log',
    );
    return null;
  }
  if (!(standardUncertaintyDeg > 0 && standardUncertaintyDeg <= LARGEST_STANDARD_UNCERTAINTY_DEG)) {
    row.refuse(
      'angle_u_deg',
      'out-of-range',
      `standard uncertainty of the plane angle must be > 0 and ≤ ${LARGEST_STANDARD_UNCERTAINTY_DEG} deg, got ${row.original('angle_u_deg')}`,
    );
    return null;
  }
  const planeAngleDeg = wrapPlaneAngleDeg(angleDeg);
  return {
    method: 'instrument',
    engineVersion: null,
    photoSha256: null,
    instrument: null,
    operator: row.text('operator'),
    remarks: null,
    setAside: false,
    result: {
      outcome: 'by-instrument',
      planeAngleDeg,
      expandedUncertaintyDeg: COVERAGE_FACTOR * standardUncertaintyDeg,
      coverageFactor: COVERAGE_FACTOR,
      hand: handOfPlaneAngle(planeAngleDeg),
      // A protractor gives the slope of the trace; whether the break is flat or a helix, the log does not say.
      shape: Math.abs(planeAngleDeg) > 67.5 ? 'longitudinal' : 'helix',
      planeTiltDeg: null,
      segments: [{ planeAngleDeg, share: 1 }],
    },
  };
}

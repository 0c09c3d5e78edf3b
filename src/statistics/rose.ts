import { wrapPlaneAngleDeg } from '../angle.ts';
import { LabError } from '../errors.ts';

/** One petal of a rose diagram: how many plane angles lie in (fromDeg, toDeg]. */
export interface RosePetal {
  readonly fromDeg: number;
  readonly toDeg: number;
  readonly count: number;
  /** 0 to 1. */
  readonly share: number;
}

/**
 * Counts of plane angles over (−90, 90]. A petal reads from −90 up; draw it at both ends of the axis, since axes have no head,
 * with its length as the square root of the share, so that areas compare.
 * @param petalDeg width of a petal, degrees; 180 must be a whole multiple of it
 * @throws LabError `out-of-range` for a width that does not divide 180
 */
export function rosePetals(planeAnglesDeg: readonly number[], petalDeg = 10): RosePetal[] {
  const petals = Math.round(180 / petalDeg);
  if (!(petalDeg > 0) || Math.abs(petals * petalDeg - 180) > 1e-9) {
    throw new LabError('out-of-range', `width of a petal must divide 180 degrees, got ${petalDeg}`, {
      input: 'petalDeg',
      value: petalDeg,
    });
  }
  const counts = new Array<number>(petals).fill(0);
  for (const angle of planeAnglesDeg) {
    const petal = Math.ceil((wrapPlaneAngleDeg(angle) + 90) / petalDeg) - 1;
    const at = Math.min(petals - 1, Math.max(0, petal));
    counts[at] = (counts[at] ?? 0) + 1;
  }
  return counts.map((count, i) => ({
    fromDeg: -90 + i * petalDeg,
    toDeg: -90 + (i + 1) * petalDeg,
    count,
    share: planeAnglesDeg.length === 0 ? 0 : count / planeAnglesDeg.length,
  }));
}

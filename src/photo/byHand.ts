import { LabError } from '../errors.ts';
import type { BudgetLine, PlaneReading, PointPx, Warning } from '../records/reading.ts';
import { cameraDistance, measureTrace } from './budget.ts';
import { planeReadingOf } from './planeReading.ts';
import { frameFromAxis, type PhotoPoint, toPhoto } from './unroll.ts';

export interface ByHandInput {
  /** Two points of the axis, px of the upright photo. */
  readonly axisPx: readonly [PointPx, PointPx];
  readonly diameterPx: number;
  /** The trace from edge to edge, at least two points. */
  readonly tracePx: readonly PointPx[];
  readonly widthPx: number;
  readonly heightPx: number;
  /** Standard uncertainty of the camera's squareness, degrees; default 1.5 (± 3°, k = 2). */
  readonly cameraTiltStandardUncertaintyDeg?: number;
  /** Focal length over the long side of the photo, where the photo states it. */
  readonly focalOverLongSide?: number | null;
}

export interface ByHandMeasurement extends PlaneReading {
  readonly budget: BudgetLine[];
  readonly warnings: Warning[];
  /** The fitted curve in photo pixels, for the overlay. */
  readonly fittedPx: PointPx[];
}

const point = (p: PointPx): PhotoPoint => ({ xPx: p[0], yPx: p[1] });

/**
 * Plane angle from an axis, a diameter and a trace set by hand: the same unrolling, fits and budget as the
 * automatic measurement. Hand-set points are taken to be good to 2 px or 1 % of the diameter (common practice).
 * @throws LabError `out-of-range` when the axis, diameter or trace cannot give a direction
 */
export function measureByHand(input: ByHandInput): ByHandMeasurement {
  const [from, to] = input.axisPx;
  const numbers = [...from, ...to, input.diameterPx, ...input.tracePx.flat()];
  if (!numbers.every(Number.isFinite)) {
    throw new LabError('not-a-number', 'axis, diameter and trace must be finite numbers of pixels', {
      input: 'tracePx',
    });
  }
  const axisLengthPx = Math.hypot(to[0] - from[0], to[1] - from[1]);
  if (!(axisLengthPx >= 2)) {
    throw new LabError(
      'out-of-range',
      `the two axis points must be at least 2 px apart, got ${axisLengthPx.toFixed(1)} px`,
      { input: 'axisPx', value: input.axisPx },
    );
  }
  if (!(input.diameterPx > 4)) {
    throw new LabError('out-of-range', `diameterPx must be > 4 px, got ${input.diameterPx}`, {
      input: 'diameterPx',
      value: input.diameterPx,
    });
  }
  if (input.tracePx.length < 2) {
    throw new LabError('out-of-range', `the trace needs at least 2 points, got ${input.tracePx.length}`, {
      input: 'tracePx',
      value: input.tracePx.length,
    });
  }
  const distance = cameraDistance(
    input.diameterPx / 2,
    Math.max(input.widthPx, input.heightPx),
    input.focalOverLongSide ?? null,
  );
  const frame = frameFromAxis(point(from), point(to), input.diameterPx, {
    cameraDistanceRadii: distance.radii,
    photoMiddlePx: { xPx: (input.widthPx - 1) / 2, yPx: (input.heightPx - 1) / 2 },
  });
  const placedPx = Math.max(2, 0.01 * input.diameterPx);
  const measured = measureTrace({
    frame,
    frameUncertainty: {
      axisDeg: (Math.SQRT2 * placedPx * 180) / (Math.PI * axisLengthPx),
      radiusRelative: placedPx / input.diameterPx,
      centreRadii: placedPx / input.diameterPx,
      taper: Number.POSITIVE_INFINITY,
      cameraDistanceFactor: distance.factor,
    },
    tracePx: input.tracePx.map(point),
    cameraTiltStandardUncertaintyDeg: input.cameraTiltStandardUncertaintyDeg ?? 1.5,
    independentLimit: Math.max(3, input.tracePx.length),
    pointUncertaintyPx: placedPx,
  });
  if (measured === null) {
    throw new LabError('out-of-range', 'the trace is too short to have a direction; set its points from edge to edge', {
      input: 'tracePx',
      value: input.tracePx.length,
    });
  }
  const { fit } = measured;
  const warnings: Warning[] = [];
  if (input.tracePx.length < 5) {
    warnings.push({
      code: 'few-points',
      message: `${input.tracePx.length} trace points; with five or more the roughness of the break enters the uncertainty`,
    });
  }
  return {
    ...planeReadingOf(measured),
    warnings,
    fittedPx: fit.curve.map((p): PointPx => {
      const q = toPhoto(frame, p);
      return [q.xPx, q.yPx];
    }),
  };
}

import { degToRad, planeAngleDistanceDeg, radToDeg } from '../angle.ts';
import type { BudgetLine } from '../records/reading.ts';
import { type CameraBow, fitTrace, QUICK_POINTS, type TraceFit } from './traceFit.ts';
import { type PhotoPoint, type SpecimenFrame, toSurface } from './unroll.ts';

/**
 * Focal length over the long side of the photo when nothing tells it: between a telephone's main lens (0.7) and a
 * camera's close-up lens (2.8), so 1.4, and a factor of 1.5 for its standard uncertainty (common practice).
 */
export const USUAL_FOCAL_OVER_LONG_SIDE = 1.4;
const FOCAL_UNCERTAINTY_FACTOR = 1.5;
/** The same when the photo itself states its focal length: lens data are rounded, crops are not told. */
const STATED_FOCAL_UNCERTAINTY_FACTOR = 1.15;

/** Distance of the camera from the axis in radii, known to a factor. */
export interface CameraDistance {
  readonly radii: number;
  /** Standard uncertainty as a factor, > 1. */
  readonly factor: number;
}

/**
 * A pinhole camera shows a radius of `radiusPx` at a distance of f/radiusPx radii, f the focal length in px.
 * @param focalOverLongSide as the photo states it, e.g. 35-mm-equivalent focal length over 36 mm; null when it does not
 */
export function cameraDistance(radiusPx: number, longSidePx: number, focalOverLongSide: number | null): CameraDistance {
  const focalPx = (focalOverLongSide ?? USUAL_FOCAL_OVER_LONG_SIDE) * longSidePx;
  return {
    radii: Math.max(4, focalPx / radiusPx),
    factor: focalOverLongSide === null ? FOCAL_UNCERTAINTY_FACTOR : STATED_FOCAL_UNCERTAINTY_FACTOR,
  };
}

/** How well the frame is known, standard uncertainties. */
export interface FrameUncertainty {
  readonly axisDeg: number;
  /** Of the radius, relative. */
  readonly radiusRelative: number;
  /** Of the middle line, in radii. */
  readonly centreRadii: number;
  /** Of the taper, px per px. Infinity when the taper was not measured. */
  readonly taper: number;
  /** Of the camera's distance, as a factor (> 1). */
  readonly cameraDistanceFactor: number;
}

export interface TraceMeasurement {
  readonly fit: TraceFit;
  readonly budget: readonly BudgetLine[];
  readonly combinedStandardUncertaintyDeg: number;
}

/**
 * What the camera adds to the even part of the trace (x = … + B·cos φ), in radii: a camera out of square by τ
 * moves the middle of the face by r·sin τ. (The view from the side of a break away from the middle of the photo is
 * in the unrolling already; here only what the unknown distance leaves of it.) The measured taper tells τ, since the radius on the photo falls as 1/distance: taper = −sin τ / k.
 * The tilt stated for the set-up (default ± 3°, k = 2) is the prior.
 * @param offsetRadii position of the break from the middle of the photo along the axis, radii
 */
export function cameraBow(
  frame: SpecimenFrame,
  uncertainty: Pick<FrameUncertainty, 'taper' | 'cameraDistanceFactor'>,
  offsetRadii: number,
  tiltStandardUncertaintyDeg: number,
): CameraBow {
  const k = frame.cameraDistanceRadii;
  const distanceU = Math.log(uncertainty.cameraDistanceFactor);
  const prior = Math.sin(degToRad(tiltStandardUncertaintyDeg));
  const fromTaper = -frame.taper * k;
  const uTaper = Math.hypot(k * uncertainty.taper, distanceU * fromTaper, 0.01);
  const weight = Number.isFinite(uTaper) ? 1 / (uTaper * uTaper) : 0;
  const total = weight + 1 / (prior * prior);
  const side = offsetRadii / k;
  return {
    mean: (weight * fromTaper) / total,
    sigma: Math.hypot(1 / Math.sqrt(total), distanceU * side),
  };
}

/**
 * Fits the trace and draws up the budget of its plane angle (GUM 5.1): every input is moved by its standard
 * uncertainty, the fit repeated, and the change of the angle taken as that input's contribution.
 */
export function measureTrace(input: {
  readonly frame: SpecimenFrame;
  readonly frameUncertainty: FrameUncertainty;
  readonly tracePx: readonly PhotoPoint[];
  /** The two lips of a gap, where they are seen apart: two measurements of the same plane. */
  readonly lipsPx?: readonly [readonly PhotoPoint[], readonly PhotoPoint[]];
  readonly cameraTiltStandardUncertaintyDeg: number;
  readonly independentLimit?: number;
  /** Spread of the angle over other edges that could be the specimen's, standard uncertainty, degrees. */
  readonly edgeChoiceDeg?: number;
  /** Standard uncertainty of one trace point across the trace, px. */
  readonly pointUncertaintyPx: number;
}): TraceMeasurement | null {
  const { frame, frameUncertainty: u, tracePx } = input;
  const fitWith = (f: SpecimenFrame, points = tracePx, count?: number): TraceFit | null => {
    const surface = points.map((p) => toSurface(f, p));
    const middle = surface.reduce((sum, p) => sum + p.x, 0) / Math.max(1, surface.length);
    const offset = middle - f.cameraAlongRadii;
    const bow = cameraBow(f, u, offset, input.cameraTiltStandardUncertaintyDeg);
    return fitTrace(surface, bow, input.independentLimit, count);
  };
  const fit = fitWith(frame);
  if (fit === null) return null;
  // Only differences are wanted here: a quick fit of each, against a quick fit of the frame itself.
  const quick = fitWith(frame, tracePx, QUICK_POINTS);
  const change = (moved: SpecimenFrame): number => {
    const other = fitWith(moved, tracePx, QUICK_POINTS);
    if (other === null || quick === null || other.shape !== quick.shape) return 0;
    // Of a mixed trace the same segment is compared, whichever of them governs.
    return Math.min(
      ...[other.planeAngleDeg, ...other.segments.map((s) => s.planeAngleDeg)].map((angle) =>
        planeAngleDistanceDeg(angle, quick.planeAngleDeg),
      ),
    );
  };
  const larger = (a: SpecimenFrame, b: SpecimenFrame) => Math.max(change(a), change(b));

  const turned = (deg: number): SpecimenFrame => {
    const t = degToRad(deg);
    return {
      ...frame,
      alongX: frame.alongX * Math.cos(t) - frame.alongY * Math.sin(t),
      alongY: frame.alongX * Math.sin(t) + frame.alongY * Math.cos(t),
    };
  };
  const scaled = (factor: number): SpecimenFrame => ({ ...frame, radiusPx: frame.radiusPx * factor });
  const shifted = (radii: number): SpecimenFrame => ({
    ...frame,
    originPx: {
      xPx: frame.originPx.xPx + radii * frame.radiusPx * frame.alongY,
      yPx: frame.originPx.yPx - radii * frame.radiusPx * frame.alongX,
    },
  });
  const k = frame.cameraDistanceRadii;
  const distance = larger(
    { ...frame, cameraDistanceRadii: k * u.cameraDistanceFactor },
    { ...frame, cameraDistanceRadii: Math.max(3, k / u.cameraDistanceFactor) },
  );

  const [low, high] = input.lipsPx ?? [];
  const lowFit = low === undefined ? null : fitWith(frame, low);
  const highFit = high === undefined ? null : fitWith(frame, high);
  const lips =
    lowFit === null || highFit === null || lowFit.shape !== highFit.shape
      ? 0
      : planeAngleDistanceDeg(lowFit.planeAngleDeg, highFit.planeAngleDeg) / 2;

  const tangent = Math.abs(Math.tan(degToRad(Math.min(89, Math.abs(fit.planeAngleDeg)))));
  const tilt = Math.sin(degToRad(input.cameraTiltStandardUncertaintyDeg)) ** 2 / 2;
  const foreshortening = radToDeg((tangent * tilt) / (1 + tangent * tangent));
  const traceRadii = Math.max(0.3, (2 * Math.sin(Math.PI / 3)) / Math.max(0.1, Math.cos(degToRad(fit.planeAngleDeg))));
  const sampling =
    radToDeg((input.pointUncertaintyPx / frame.radiusPx) * (Math.sqrt(12) / traceRadii)) /
    Math.sqrt(Math.max(2, fit.independentPoints));

  const budget: BudgetLine[] = [
    line(
      'trace-roughness',
      fit.roughnessUncertaintyDeg,
      'A',
      'scatter of the trace about the fit, correlated points counted once',
    ),
    line(
      'axis-direction',
      larger(turned(u.axisDeg), turned(-u.axisDeg)),
      'A',
      `axis known to ${u.axisDeg.toFixed(2)}°`,
    ),
    line(
      'radius',
      larger(scaled(1 + u.radiusRelative), scaled(1 - u.radiusRelative)),
      'A',
      `radius known to ${(100 * u.radiusRelative).toFixed(1)} %`,
    ),
    line(
      'centre',
      larger(shifted(u.centreRadii), shifted(-u.centreRadii)),
      'A',
      `middle line known to ${(100 * u.centreRadii).toFixed(1)} % of the radius`,
    ),
    line(
      'camera-tilt',
      foreshortening,
      'B',
      `camera out of square by ${input.cameraTiltStandardUncertaintyDeg}° (standard uncertainty)`,
    ),
    line(
      'camera-distance',
      distance,
      'B',
      `camera ${(k / 2).toFixed(0)} diameters away, known to a factor of ${u.cameraDistanceFactor}`,
    ),
    line('pixel-sampling', sampling, 'B', `a trace point is placed to ${input.pointUncertaintyPx.toFixed(2)} px`),
    ...(input.lipsPx === undefined
      ? []
      : [
          line('lips', lips, 'A', 'half the difference between the two lips of the gap, two measurements of one plane'),
        ]),
    ...(input.edgeChoiceDeg === undefined
      ? []
      : [
          line(
            'edge-choice',
            input.edgeChoiceDeg,
            'B',
            'other edges that could be those of the specimen, weighted by how likely they are',
          ),
        ]),
    line('model-choice', fit.modelUncertaintyDeg, 'B', 'difference between shapes that fit about as well'),
  ];
  const combined = Math.sqrt(budget.reduce((sum, b) => sum + b.standardUncertaintyDeg ** 2, 0));
  return { fit, budget, combinedStandardUncertaintyDeg: combined };
}

function line(
  component: string,
  standardUncertaintyDeg: number,
  evaluation: 'A' | 'B',
  explanation: string,
): BudgetLine {
  return {
    component,
    standardUncertaintyDeg: Number.isFinite(standardUncertaintyDeg) ? standardUncertaintyDeg : 0,
    evaluation,
    explanation,
  };
}

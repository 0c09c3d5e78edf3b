import { handOfPlaneAngle } from '../angle.ts';
import type { BudgetLine, NOT_MEASURED_CODES, PlaneReading, PointPx, Warning } from '../records/reading.ts';
import { cameraDistance, type FrameUncertainty, measureTrace, type TraceMeasurement } from './budget.ts';
import { COVERAGE_FACTOR } from './byHand.ts';
import { type Candidate, type EndOfHalf, findCandidates, findHalves, type HalfCandidate } from './candidates.ts';
import { centreOfGap } from './centreOfGap.ts';
import { searchPairTrace } from './pairTrace.ts';
import type { Picture } from './picture.ts';
import { LEAST_PX_ACROSS, type PhotoQuality, qualityOf, WANTED_PX_ACROSS } from './quality.ts';
import { refineFrame } from './refineFrame.ts';
import { refineRim } from './rimTrace.ts';
import { type PhotoPoint, type SpecimenFrame, type SurfacePoint, toPhoto } from './unroll.ts';

export type NotMeasuredCode = (typeof NOT_MEASURED_CODES)[number];

export interface PictureOptions {
  /** Standard uncertainty of the camera's squareness, degrees. */
  readonly cameraTiltStandardUncertaintyDeg: number;
  /** Told what was decided and on what figures, for `--debug`. */
  /** Focal length over the long side of the photo, where the photo states it. */
  readonly focalOverLongSide?: number | null;
  readonly onNote?: (topic: string, figures: unknown) => void;
}

/** Result of one picture; points in px of the full-resolution photo. */
export type PictureMeasurement =
  | (PlaneReading & {
      readonly outcome: 'measured';
      readonly view: 'pair' | 'half';
      readonly axisPx: [PointPx, PointPx];
      readonly diameterPx: number;
      readonly tracePx: PointPx[];
      readonly edgesPx: [PointPx, PointPx][];
      readonly budget: BudgetLine[];
      readonly quality: Record<string, number>;
      readonly warnings: Warning[];
    })
  | {
      readonly outcome: 'not-measured';
      readonly reason: { readonly code: NotMeasuredCode; readonly message: string };
      readonly axisPx?: [PointPx, PointPx];
      readonly diameterPx?: number;
      readonly quality?: Record<string, number>;
      readonly warnings: Warning[];
    };

/** The trace of a specimen at full resolution and what follows from it. */
interface Measured {
  readonly view: 'pair' | 'half';
  readonly frame: SpecimenFrame;
  readonly candidate: Candidate;
  readonly points: readonly SurfacePoint[];
  readonly measured: TraceMeasurement;
  readonly pointUncertaintyPx: number;
}

const FINEST_STEP = 1 / 150;
/** How far from the path the lips of its gap are looked for, radii. */
const CENTRE_REACH = 0.22;

/**
 * Measures the fracture plane in a picture: candidates for the specimen, the trace of each, the best of them at
 * full resolution, fit and budget. Says `not-measured` rather than guess.
 */
export function measurePicture(picture: Picture, options: PictureOptions): PictureMeasurement {
  const note = options.onNote ?? (() => undefined);
  const candidates = findCandidates(picture);
  note(
    'candidates',
    candidates.map((c) => ({
      score: c.hypothesis.score,
      value: c.pairValue,
      radiusPx: c.frame.radiusPx,
      cost: c.trace?.costPerRow,
      missing: c.trace?.missingShare,
      missingEnd: c.trace?.missingEnd,
      sides: c.trace?.sidesUnlike,
      gap: c.trace?.gapUnlike,
    })),
  );
  const first = candidates[0];
  if (first === undefined) {
    return refuse(
      'no-specimen',
      'no two parallel edges of a specimen were found; lay it on a plain background unlike it',
    );
  }
  const pair = acceptedPair(candidates);
  let result: Measured | null = pair === null ? null : measurePair(picture, pair, options);
  if (result === null) {
    const halves = findHalves(picture, candidates);
    const half = chooseHalf(picture, halves, options);
    note('halves', half.note);
    if ('refusal' in half) return half.refusal;
    result = half.measured;
  }
  const quality = qualityOf(picture, result.frame, result.candidate.fromX, result.candidate.toX, picture.scale);
  return describe(picture, result, quality, options);
}

function refuse(
  code: NotMeasuredCode,
  message: string,
  where: object = {},
): PictureMeasurement & { outcome: 'not-measured' } {
  return { outcome: 'not-measured', reason: { code, message }, warnings: [], ...where };
}

/** Cost a row beyond which nothing is taken for a gap, and the share of rows that may show none. */
const MOST_COST = 0.72;
const MOST_MISSING = 0.5;
/** The gap must differ from the surface beside it by this, lightness units, and more than its two sides from each other. */
const LEAST_GAP = 7;
const GAP_OVER_SIDES = 1.3;

function acceptedPair(candidates: readonly Candidate[]): Candidate | null {
  const trace = candidates[0]?.trace ?? null;
  if (trace === null) return null;
  const { costPerRow, missingShare, gapUnlike, sidesUnlike, missingEnd } = trace;
  if (costPerRow > MOST_COST || missingShare > MOST_MISSING || missingEnd > 0.3) return null;
  // A split along the axis leaves no rows to compare its sides in.
  if (gapUnlike > 0 && (gapUnlike < LEAST_GAP || gapUnlike < GAP_OVER_SIDES * sidesUnlike)) return null;
  return candidates[0] ?? null;
}

function fineFrame(picture: Picture, candidate: Candidate, options: PictureOptions) {
  const start = candidate.frame;
  const fromPx = candidate.fromX * start.radiusPx;
  const toPx = candidate.toX * start.radiusPx;
  const fine = refineFrame(picture, start, fromPx, toPx, Math.max(3, 0.05 * start.radiusPx));
  const refined = fine ?? candidate.refined;
  const found = fine?.frame ?? start;
  const distance = cameraDistance(
    found.radiusPx,
    Math.max(picture.widthPx, picture.heightPx),
    options.focalOverLongSide ?? null,
  );
  const frame: SpecimenFrame = { ...found, cameraDistanceRadii: distance.radii };
  const middleX = (picture.widthPx - 1) / 2 - frame.originPx.xPx;
  const middleY = (picture.heightPx - 1) / 2 - frame.originPx.yPx;
  return {
    frame: { ...frame, cameraAlongRadii: (middleX * frame.alongX + middleY * frame.alongY) / frame.radiusPx },
    uncertainty: {
      axisDeg: refined?.axisStandardUncertaintyDeg ?? 0.3,
      radiusRelative: refined?.radiusRelativeUncertainty ?? 0.02,
      centreRadii: refined?.centreUncertaintyRadii ?? 0.02,
      taper: refined?.taperUncertainty ?? 0.01,
      cameraDistanceFactor: distance.factor,
    },
  };
}

function measurePair(picture: Picture, candidate: Candidate, options: PictureOptions): Measured | null {
  const rough = candidate.trace;
  if (rough === null) return null;
  const { frame, uncertainty } = fineFrame(picture, candidate, options);
  const xs = rough.points.map((p) => p.x);
  const stepRadii = Math.max(FINEST_STEP, 1 / frame.radiusPx);
  const parallel = { ...frame, cameraDistanceRadii: Number.POSITIVE_INFINITY };
  const fine = searchPairTrace(picture, parallel, {
    fromX: Math.min(...xs) - 0.8,
    toX: Math.max(...xs) + 0.8,
    stepRadii,
    gapSizes: [3, 5, 9, 17],
    near: { points: rough.points, reachRadii: 0.25 },
  });
  const points = fine === null ? rough.points : centreOfGap(fine.map, fine.points, CENTRE_REACH).points;
  return finish(
    picture,
    'pair',
    frame,
    uncertainty,
    candidate,
    points.map((p) => toPhoto(parallel, p)),
    points,
    stepRadii,
    options,
  );
}

function finish(
  _picture: Picture,
  view: 'pair' | 'half',
  frame: SpecimenFrame,
  uncertainty: FrameUncertainty,
  candidate: Candidate,
  tracePx: readonly PhotoPoint[],
  points: readonly SurfacePoint[],
  stepRadii: number,
  options: PictureOptions,
): Measured | null {
  const pointUncertaintyPx = Math.max(0.5, 0.5 * stepRadii * frame.radiusPx);
  const measured = measureTrace({
    frame,
    frameUncertainty: uncertainty,
    tracePx,
    cameraTiltStandardUncertaintyDeg: options.cameraTiltStandardUncertaintyDeg,
    pointUncertaintyPx,
  });
  return measured === null ? null : { view, frame, candidate, points, measured, pointUncertaintyPx };
}

type HalfChoice =
  | { readonly measured: Measured; readonly note: unknown }
  | { readonly refusal: PictureMeasurement & { outcome: 'not-measured' }; readonly note: unknown };

interface MeasuredEnd {
  readonly end: EndOfHalf;
  readonly half: HalfCandidate;
  readonly result: Measured;
  /** Sawn: square to the axis and smooth. */
  readonly sawn: boolean;
}

const CLEAR_RIM = 0.8;

function chooseHalf(picture: Picture, halves: readonly HalfCandidate[], options: PictureOptions): HalfChoice {
  const ends: MeasuredEnd[] = [];
  const looked: unknown[] = [];
  for (const half of halves) {
    for (const end of half.rims) {
      if (end.rim === null || end.rim.clearShare < CLEAR_RIM) {
        looked.push({
          score: half.candidate.hypothesis.score,
          end: end.end,
          cut: end.cutByPhoto,
          clear: end.rim?.clearShare,
        });
        continue;
      }
      const result = measureRim(picture, half.candidate, end.rim, options);
      if (result === null) continue;
      const { fit } = result.measured;
      const pixel = 1 / result.frame.radiusPx;
      const sawn =
        Math.abs(fit.planeAngleDeg) < 4 &&
        fit.shape !== 'mixed' &&
        fit.shape !== 'longitudinal' &&
        fit.scatterRadii < Math.max(0.011, 0.6 * pixel);
      looked.push({
        score: half.candidate.hypothesis.score,
        end: end.end,
        angle: fit.planeAngleDeg,
        scatter: fit.scatterRadii,
        contrast: end.rim.contrast,
        clear: end.rim.clearShare,
        sawn,
      });
      ends.push({ end, half, result, sawn });
    }
  }
  const broken = ends
    .filter((e) => !e.sawn)
    .sort((a, b) => b.half.candidate.hypothesis.score - a.half.candidate.hypothesis.score);
  const best = broken[0];
  if (best === undefined) {
    const first = halves[0];
    const where =
      first === undefined ? {} : place(picture, first.candidate.frame, first.candidate.fromX, first.candidate.toX);
    if (first?.rims.every((r) => r.cutByPhoto) === true) {
      return {
        refusal: refuse(
          'no-fracture',
          'the specimen runs out of the photo at both ends and no trace crosses it; take the break into the middle of the photo',
          where,
        ),
        note: looked,
      };
    }
    return {
      refusal: refuse(
        'no-fracture',
        'no trace runs across the specimen and its ends look sawn; show the broken end or the joint of the two halves',
        where,
      ),
      note: looked,
    };
  }
  return { measured: best.result, note: looked };
}

function measureRim(
  picture: Picture,
  candidate: Candidate,
  rim: { readonly points: readonly SurfacePoint[] },
  options: PictureOptions,
): Measured | null {
  const { frame, uncertainty } = fineFrame(picture, candidate, options);
  const stepRadii = Math.max(FINEST_STEP, 1 / frame.radiusPx);
  const parallel = { ...frame, cameraDistanceRadii: Number.POSITIVE_INFINITY };
  const points = refineRim(picture, parallel, rim.points, stepRadii, 0.12) ?? rim.points;
  return finish(
    picture,
    'half',
    frame,
    uncertainty,
    candidate,
    points.map((p) => toPhoto(parallel, p)),
    points,
    stepRadii,
    options,
  );
}

const inPhoto = (p: PhotoPoint, scale: number): PointPx => [(p.xPx + 0.5) / scale - 0.5, (p.yPx + 0.5) / scale - 0.5];

function place(
  picture: Picture,
  frame: SpecimenFrame,
  fromX: number,
  toX: number,
): { axisPx: [PointPx, PointPx]; diameterPx: number } {
  return {
    axisPx: [
      inPhoto(toPhoto(frame, { x: fromX, phi: 0 }), picture.scale),
      inPhoto(toPhoto(frame, { x: toX, phi: 0 }), picture.scale),
    ],
    diameterPx: (2 * frame.radiusPx) / picture.scale,
  };
}

const TRACE_POINTS = 160;

function describe(
  picture: Picture,
  result: Measured,
  quality: PhotoQuality,
  _options: PictureOptions,
): PictureMeasurement {
  const { frame, measured } = result;
  const { fit } = measured;
  const flat: SpecimenFrame = { ...frame, cameraDistanceRadii: Number.POSITIVE_INFINITY };
  const where = place(picture, flat, result.candidate.fromX, result.candidate.toX);
  if (quality.pxAcross < LEAST_PX_ACROSS) {
    return refuse('too-small', `move closer: ${Math.round(quality.pxAcross)} px across, ${WANTED_PX_ACROSS} wanted`, {
      ...where,
      quality,
    });
  }
  const warnings: Warning[] = [];
  if (quality.pxAcross < WANTED_PX_ACROSS) {
    warnings.push({
      code: 'few-pixels',
      message: `move closer: ${Math.round(quality.pxAcross)} px across, ${WANTED_PX_ACROSS} wanted`,
    });
  }
  if (quality.overExposedShare > 0.15) {
    warnings.push({
      code: 'over-exposed',
      message: `${Math.round(100 * quality.overExposedShare)} % of the specimen is white; expose less or soften the light`,
    });
  }
  const every = Math.max(1, Math.ceil(result.points.length / TRACE_POINTS));
  const tracePx = result.points
    .filter((_, i) => i % every === 0 || i === result.points.length - 1)
    .map((p) => inPhoto(toPhoto(flat, p), picture.scale));
  const edge = (side: 1 | -1): [PointPx, PointPx] => [
    inPhoto(toPhoto(flat, { x: result.candidate.fromX, phi: (side * Math.PI) / 2 }), picture.scale),
    inPhoto(toPhoto(flat, { x: result.candidate.toX, phi: (side * Math.PI) / 2 }), picture.scale),
  ];
  return {
    outcome: 'measured',
    view: result.view,
    planeAngleDeg: fit.planeAngleDeg,
    expandedUncertaintyDeg: COVERAGE_FACTOR * measured.combinedStandardUncertaintyDeg,
    coverageFactor: COVERAGE_FACTOR,
    hand: handOfPlaneAngle(fit.planeAngleDeg),
    shape: fit.shape,
    planeTiltDeg: fit.planeTiltDeg,
    planeTiltExpandedUncertaintyDeg:
      fit.planeTiltStandardUncertaintyDeg === null ? null : COVERAGE_FACTOR * fit.planeTiltStandardUncertaintyDeg,
    segments: fit.segments.map((s) => ({
      planeAngleDeg: s.planeAngleDeg,
      share: s.share,
      expandedUncertaintyDeg: COVERAGE_FACTOR * s.standardUncertaintyDeg,
      ...(s.closingStep ? { closingStep: true } : {}),
    })),
    ...where,
    tracePx,
    edgesPx: [edge(1), edge(-1)],
    budget: [...measured.budget],
    quality: { ...quality },
    warnings,
  };
}

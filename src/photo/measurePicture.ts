import { planeAngleDistanceDeg } from '../angle.ts';
import type { BudgetLine, NOT_MEASURED_CODES, PlaneReading, PointPx, Warning } from '../records/reading.ts';
import { cameraDistance, type FrameUncertainty, measureTrace, type TraceMeasurement } from './budget.ts';
import { type Candidate, findCandidates, findHalves, levelsOf } from './candidates.ts';
import { centreOfGap } from './centreOfGap.ts';
import { acceptance, type PhotoReading, readAsHalf, readAsPair } from './choice.ts';
import { type PairTrace, SEARCHED_HALF_WIDTH, searchPairTrace } from './pairTrace.ts';
import type { Picture } from './picture.ts';
import { planeReadingOf } from './planeReading.ts';
import { LEAST_PX_ACROSS, type PhotoQuality, qualityOf, WANTED_PX_ACROSS } from './quality.ts';
import { refineFrame } from './refineFrame.ts';
import { refineRim } from './rimTrace.ts';
import { evidenceStage, faceStage, type StagePicture, specimenStage } from './stages.ts';
import { type PhotoPoint, type SpecimenFrame, type SurfacePoint, toPhoto, toSurface } from './unroll.ts';
import { unrollFace } from './unrolledMap.ts';

export type NotMeasuredCode = (typeof NOT_MEASURED_CODES)[number];

export interface PictureOptions {
  /** Standard uncertainty of the camera's squareness, degrees. */
  readonly cameraTiltStandardUncertaintyDeg: number;
  /** Focal length over the long side of the photo, where the photo states it. */
  readonly focalOverLongSide?: number | null;
  /** Told what was decided and on what figures, for `--debug`. */
  /** Least probability of being right with which a reading is given, 0 to 1. */
  readonly leastAcceptance?: number;
  /** Receives the stages of the measurement as pictures. */
  readonly onStage?: (name: string, stage: StagePicture) => void;
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
  | PictureRefusal;

export interface PictureRefusal {
  readonly outcome: 'not-measured';
  readonly reason: { readonly code: NotMeasuredCode; readonly message: string };
  readonly axisPx?: [PointPx, PointPx];
  readonly diameterPx?: number;
  readonly quality?: Record<string, number>;
  readonly warnings: Warning[];
}

/** The trace of a specimen at full resolution and what follows from it. */
interface Measured {
  readonly reading: PhotoReading;
  readonly frame: SpecimenFrame;
  readonly points: readonly SurfacePoint[];
  readonly measured: TraceMeasurement;
}

/**
 * Measures the fracture plane in a picture: candidates for the specimen, the ways to read each (a gap between two
 * halves, a broken end), the likeliest of them at full resolution, fit and budget. Says `not-measured` rather than guess.
 */
export function measurePicture(picture: Picture, options: PictureOptions): PictureMeasurement {
  const readings = readingsOf(picture);
  options.onNote?.(
    'readings',
    readings.slice(0, 6).map((r) => ({
      view: r.view,
      value: r.value,
      angle: r.fit?.planeAngleDeg,
      radiusPx: r.candidate.frame.radiusPx,
      ...r.features,
    })),
  );
  const best = readings[0];
  if (best === undefined) {
    return refusal(
      'no-specimen',
      'no two parallel edges of a specimen were found; lay it on a plain background unlike it',
    );
  }
  const accepted = acceptance(readings);
  options.onNote?.('acceptance', accepted);
  const quality = qualityOf(picture, best.candidate.frame, best.candidate.fromX, best.candidate.toX, picture.scale);
  const where = placeOf(picture, best.candidate.frame, best.candidate);
  const poor = tooPoor(quality);
  if (poor !== null) return { ...refusal(poor.code, poor.message), ...where, quality: { ...quality } };
  const lost = best.features.missingEnd ?? 0;
  if (best.view === 'pair' && best.features.steep !== 1 && lost > MOST_LOST) {
    const message = `the trace is lost ${Math.round(100 * lost)} % of the way from one edge; light it better, or set the trace by hand`;
    return { ...refusal('no-fracture', message), ...where, quality: { ...quality } };
  }
  const second = best.candidate.trace?.secondCostPerRow ?? 1;
  if (best.view === 'pair' && second < CLEAR_SECOND) {
    const message = 'more than one line runs right across the specimen; clear marks away, or set the trace by hand';
    return { ...refusal('ambiguous', message), ...where, quality: { ...quality } };
  }
  if (accepted < (options.leastAcceptance ?? LEAST_ACCEPTANCE[best.view]))
    return { ...whyNot(readings, best), ...where, quality: { ...quality } };
  const result = measureReading(picture, best, edgeChoiceDeg(readings, best), options);
  if (result === null) {
    return {
      ...refusal('no-fracture', 'the trace is too short to have a direction'),
      ...where,
      quality: { ...quality },
    };
  }
  return describe(picture, result, quality);
}

/**
 * A fracture trace runs from edge to edge (of a longitudinal split the short ends may be lost). Among 1566 candidate traces of rendered photos lost over more than this share
 * of the face at one end, 6 were right.
 */
const MOST_LOST = 0.2;
/** A second line as clear as this (cost a row) beside the first: among 247 such candidates of rendered photos 1 was right. */
const CLEAR_SECOND = 0.3;
/**
 * A reading less likely right than this is not given. Of 338 rendered photos 51 halves were given from 0.3 on, 46 of them
 * right, and 131 pairs from 0.45 on, 120 right, to 3° or their own uncertainty.
 */
const LEAST_ACCEPTANCE = { pair: 0.45, half: 0.3 } as const;

/** All ways to read the photo, the likeliest first. */
export function readingsOf(picture: Picture): PhotoReading[] {
  const levels = levelsOf(picture);
  const candidates = findCandidates(picture, levels);
  const pairs = candidates.map(readAsPair);
  const halves = findHalves(levels, candidates).flatMap((half) => half.rims.map((end) => readAsHalf(half, end)));
  return [...pairs, ...halves].filter((r): r is PhotoReading => r !== null).sort((a, b) => b.value - a.value);
}

function refusal(code: NotMeasuredCode, message: string): PictureRefusal {
  return { outcome: 'not-measured', reason: { code, message }, warnings: [] };
}

function tooPoor(quality: PhotoQuality): { code: NotMeasuredCode; message: string } | null {
  if (quality.pxAcross < LEAST_PX_ACROSS) {
    return {
      code: 'too-small',
      message: `move closer: ${Math.round(quality.pxAcross)} px across, ${WANTED_PX_ACROSS} wanted`,
    };
  }
  if (quality.lightness < 10)
    return { code: 'too-dark', message: 'the specimen is nearly black in the photo; give more light or expose longer' };
  if (quality.overExposedShare > 0.8) {
    return {
      code: 'over-exposed',
      message: `${Math.round(100 * quality.overExposedShare)} % of the specimen is white beyond recovery; expose less`,
    };
  }
  return null;
}

/** How far apart the angles of two readings are when they say different things, degrees. */
const DIFFERENT_DEG = 8;

function whyNot(readings: readonly PhotoReading[], best: PhotoReading): PictureRefusal {
  const other = readings.find(
    (r) =>
      r.fit !== null &&
      best.fit !== null &&
      planeAngleDistanceDeg(r.fit.planeAngleDeg, best.fit.planeAngleDeg) > DIFFERENT_DEG,
  );
  if (
    other !== undefined &&
    best.features.gap !== undefined &&
    best.view === 'pair' &&
    best.value - other.value < 0.5 &&
    best.features.gap > 1.2
  ) {
    return refusal(
      'ambiguous',
      'more than one line could be the fracture trace; clear the background, or set the trace by hand',
    );
  }
  const likeSpecimen = Math.max(...readings.map((r) => r.candidate.hypothesis.score));
  if (likeSpecimen < LEAST_SPECIMEN_SCORE) {
    return refusal('no-specimen', 'no specimen stands out from its background; lay it on a plain background unlike it');
  }
  return refusal(
    'no-fracture',
    'no fracture trace was found across the specimen; show the joint of the two halves or the broken end, or set the trace by hand',
  );
}

/** Below this the likeliest pair of edges is hardly a specimen (scores of specimenPairs.ts). */
const LEAST_SPECIMEN_SCORE = 4;

const FINEST_STEP = 1 / 150;
/** How far from the path the lips of its gap are looked for, radii. */
const CENTRE_REACH = 0.22;
/** Band round the roughly known trace in which it is followed at full resolution, radii. */
const GAP_BAND = 0.25;
const RIM_BAND = 0.12;

function measureReading(
  picture: Picture,
  reading: PhotoReading,
  edgeChoice: number,
  options: PictureOptions,
): Measured | null {
  const { frame, uncertainty } = fineFrame(picture, reading.candidate, options);
  const stepRadii = Math.max(FINEST_STEP, 1 / frame.radiusPx);
  // The trace is followed in a parallel view: which azimuth a row is does not matter for following it.
  const parallel: SpecimenFrame = { ...frame, cameraDistanceRadii: Number.POSITIVE_INFINITY };
  const inPicture = (list: readonly SurfacePoint[]) => list.map((p) => toPhoto(parallel, p));
  let points = reading.points;
  let fineMap: PairTrace | null = null;
  let lipsPx: readonly [PhotoPoint[], PhotoPoint[]] | undefined;
  if (reading.view === 'pair') {
    const xs = reading.points.map((p) => p.x);
    const fine = searchPairTrace(picture, parallel, {
      fromX: Math.min(...xs) - 0.8,
      toX: Math.max(...xs) + 0.8,
      stepRadii,
      gapSizes: [3, 5, 9, 17],
      near: { points: reading.points, reachRadii: GAP_BAND },
    });
    if (fine !== null) {
      fineMap = fine;
      const centred = centreOfGap(fine.map, fine.points, CENTRE_REACH);
      points = centred.points;
      lipsPx = [inPicture(centred.lips[0]), inPicture(centred.lips[1])];
    }
  } else {
    points = refineRim(picture, parallel, reading.points, stepRadii, RIM_BAND) ?? reading.points;
  }
  const measured = measureTrace({
    frame,
    frameUncertainty: uncertainty,
    tracePx: inPicture(points),
    ...(lipsPx === undefined ? {} : { lipsPx }),
    cameraTiltStandardUncertaintyDeg: options.cameraTiltStandardUncertaintyDeg,
    edgeChoiceDeg: edgeChoice,
    pointUncertaintyPx: Math.max(0.5, 0.5 * stepRadii * frame.radiusPx),
  });
  if (options.onStage !== undefined) {
    options.onStage('1-specimen', specimenStage(picture, parallel, reading.candidate, points));
    const curve = (measured?.fit.curve ?? []).map((p) => toSurface(parallel, toPhoto(frame, p)));
    if (fineMap !== null) {
      options.onStage('2-gap-evidence', evidenceStage(fineMap.map, fineMap.evidence, fineMap.points));
      options.onStage('3-unrolled-face', faceStage(fineMap.map, points, curve));
    } else {
      const xs = points.map((p) => p.x);
      const face = unrollFace(
        picture,
        parallel,
        Math.min(...xs) - 1,
        Math.max(...xs) + 1,
        stepRadii,
        SEARCHED_HALF_WIDTH,
      );
      options.onStage('3-unrolled-face', faceStage(face, points, curve));
    }
  }
  return measured === null ? null : { reading, frame, points, measured };
}

/** Readings further apart than this see another trace, not other edges of the same one, degrees. */
const SAME_TRACE_DEG = 8;

/**
 * Spread of the plane angle over readings of the same trace between other edges, each weighted by its odds against the
 * best one (the values are log odds): what the choice of the edges leaves uncertain.
 */
function edgeChoiceDeg(readings: readonly PhotoReading[], best: PhotoReading): number {
  if (best.fit === null) return 0;
  let weight = 0;
  let sum = 0;
  for (const { view, fit, value } of readings) {
    // A trace of several segments has an angle only beside others of several segments.
    if (view !== best.view || fit === null || (fit.shape === 'mixed') !== (best.fit.shape === 'mixed')) continue;
    const own = best.fit.planeAngleDeg;
    const apart = Math.min(...fit.segments.map((s) => planeAngleDistanceDeg(s.planeAngleDeg, own)));
    if (apart > SAME_TRACE_DEG) continue;
    const odds = Math.exp(value - best.value);
    weight += odds;
    sum += odds * apart * apart;
  }
  return weight > 0 ? Math.sqrt(sum / weight) : 0;
}

function fineFrame(
  picture: Picture,
  candidate: Candidate,
  options: PictureOptions,
): { frame: SpecimenFrame; uncertainty: FrameUncertainty } {
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
  const middleX = (picture.widthPx - 1) / 2 - found.originPx.xPx;
  const middleY = (picture.heightPx - 1) / 2 - found.originPx.yPx;
  return {
    frame: {
      ...found,
      cameraDistanceRadii: distance.radii,
      cameraAlongRadii: (middleX * found.alongX + middleY * found.alongY) / found.radiusPx,
    },
    uncertainty: {
      axisDeg: refined?.axisStandardUncertaintyDeg ?? 0.3,
      radiusRelative: refined?.radiusRelativeUncertainty ?? 0.02,
      centreRadii: refined?.centreUncertaintyRadii ?? 0.02,
      taper: refined?.taperUncertainty ?? 0.01,
      cameraDistanceFactor: distance.factor,
    },
  };
}

/** Picture px → px of the full-resolution photo (integer = pixel centre in both). */
const inPhoto = (p: PhotoPoint, scale: number): PointPx => [(p.xPx + 0.5) / scale - 0.5, (p.yPx + 0.5) / scale - 0.5];

function placeOf(
  picture: Picture,
  frame: SpecimenFrame,
  stretch: { readonly fromX: number; readonly toX: number },
): { axisPx: [PointPx, PointPx]; diameterPx: number } {
  const flat: SpecimenFrame = { ...frame, cameraDistanceRadii: Number.POSITIVE_INFINITY };
  const at = (x: number) => inPhoto(toPhoto(flat, { x, phi: 0 }), picture.scale);
  return { axisPx: [at(stretch.fromX), at(stretch.toX)], diameterPx: (2 * frame.radiusPx) / picture.scale };
}

/** Most points of a trace handed out: enough to draw it. */
const TRACE_POINTS = 160;

function describe(picture: Picture, result: Measured, quality: PhotoQuality): PictureMeasurement {
  const { frame, measured, reading, points } = result;
  const flat: SpecimenFrame = { ...frame, cameraDistanceRadii: Number.POSITIVE_INFINITY };
  const every = Math.max(1, Math.ceil(points.length / TRACE_POINTS));
  const edge = (side: 1 | -1): [PointPx, PointPx] => [
    inPhoto(toPhoto(flat, { x: reading.candidate.fromX, phi: (side * Math.PI) / 2 }), picture.scale),
    inPhoto(toPhoto(flat, { x: reading.candidate.toX, phi: (side * Math.PI) / 2 }), picture.scale),
  ];
  return {
    outcome: 'measured',
    view: reading.view,
    ...planeReadingOf(measured),
    ...placeOf(picture, frame, reading.candidate),
    tracePx: points
      .filter((_, i) => i % every === 0 || i === points.length - 1)
      .map((p) => inPhoto(toPhoto(flat, p), picture.scale)),
    edgesPx: [edge(1), edge(-1)],
    quality: { ...quality },
    warnings: warningsOf(quality),
  };
}

function warningsOf(quality: PhotoQuality): Warning[] {
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
  if (quality.lightness < 35)
    warnings.push({ code: 'dark', message: 'the specimen is dark in the photo; give more light or expose longer' });
  return warnings;
}

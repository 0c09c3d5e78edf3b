import { degToRad, planeAngleDistanceDeg, radToDeg, wrapPlaneAngleDeg } from '../angle.ts';
import type { FractureShape } from '../records/reading.ts';
import { correlationFactor, fitLinear, medianOf, type Prior } from './leastSquares.ts';
import { polylineLength, resamplePolyline } from './polyline.ts';
import { bestPieces, pieceResiduals, type StraightPiece } from './segments.ts';
import type { SurfacePoint } from './unroll.ts';

/** Half-width of the visible face whose trace gives the plane angle, radians (60°). */
export const FACE_HALF_WIDTH = Math.PI / 3;
/** Slope of a flat cut over ±60° of the face against its slope in the middle: ∫φ sin φ / ∫φ². */
export const FLAT_CUT_MEAN_SLOPE =
  (3 * (Math.sin(FACE_HALF_WIDTH) - FACE_HALF_WIDTH * Math.cos(FACE_HALF_WIDTH))) / FACE_HALF_WIDTH ** 3;

const POINTS = 121;
/** Points of a quick fit, for comparing readings of a photo. */
export const QUICK_POINTS = 61;
/** Roughness no photo resolves, radii: keeps a perfectly drawn line from looking infinitely certain. */
const FLOOR = 0.004;

export interface FittedSegment {
  readonly planeAngleDeg: number;
  readonly share: number;
  readonly closingStep: boolean;
  readonly standardUncertaintyDeg: number;
}

export interface TraceFit {
  readonly shape: FractureShape;
  /** Least-squares slope of the trace over ±60° of the visible face (of the governing segment), degrees. */
  readonly planeAngleDeg: number;
  readonly planeTiltDeg: number | null;
  readonly planeTiltStandardUncertaintyDeg: number | null;
  readonly segments: readonly FittedSegment[];
  /** Standard uncertainty of the angle from the roughness of the trace alone, degrees. */
  readonly roughnessUncertaintyDeg: number;
  /** Half the spread between the models that fit about as well, degrees. */
  readonly modelUncertaintyDeg: number;
  /** Robust scatter of the trace about the fit, radii. */
  readonly scatterRadii: number;
  /** Number of independent points the fit rests on. */
  readonly independentPoints: number;
  /** Fitted curve, for drawing. */
  readonly curve: readonly SurfacePoint[];
}

interface SingleFit {
  readonly name: 'line' | 'flat';
  readonly planeAngleDeg: number;
  readonly slopeUncertaintyDeg: number;
  readonly tilt: { deg: number; uncertaintyDeg: number } | null;
  readonly residuals: Float64Array;
  readonly scatter: number;
  readonly independent: number;
  readonly parameters: number;
  readonly sse: number;
  readonly curve: SurfacePoint[];
}

const columnOf = (points: readonly SurfacePoint[], f: (p: SurfacePoint) => number) => Float64Array.from(points, f);

/**
 * Share of the even (cos φ) part that the camera, not the specimen, puts into a trace: a camera out of
 * square by τ shifts the middle of the face by r·sin τ. See budget.ts for where mean and sigma come from.
 */
export interface CameraBow {
  readonly mean: number;
  readonly sigma: number;
}

/** Fits x = c + a·φ + B·cos φ (helix) or x = c + A·sin φ + B·cos φ (flat cut) over the whole visible trace. */
function fitSingle(
  points: readonly SurfacePoint[],
  name: 'line' | 'flat',
  bow: CameraBow,
  independentLimit: number,
): SingleFit | null {
  const y = columnOf(points, (p) => p.x);
  const ones = columnOf(points, () => 1);
  const odd = columnOf(points, (p) => (name === 'line' ? p.phi : Math.sin(p.phi)));
  const even = columnOf(points, (p) => Math.cos(p.phi));
  const free: Prior = { mean: 0, sigma: Number.POSITIVE_INFINITY };
  const bowPrior: Prior = name === 'line' ? { mean: bow.mean, sigma: bow.sigma } : { mean: bow.mean, sigma: 1.5 };
  const rough = fitLinear([ones, odd, even], y, { priors: [free, free, bowPrior], priorNoise: 0.02 });
  if (rough === null) return null;
  const factor = correlationFactor(rough.residuals);
  const independent = Math.max(3, Math.min(independentLimit, points.length / factor));
  const sigma = Math.max(FLOOR, Math.sqrt((rough.rms ** 2 + rough.robustSigma ** 2) / 2));
  // The prior is weighed against the noise of independent points.
  const fit = fitLinear([ones, odd, even], y, {
    priors: [free, free, bowPrior],
    priorNoise: Math.max(FLOOR, sigma) * Math.sqrt(points.length / independent),
  });
  if (fit === null) return null;
  const [c, a, b] = fit.coefficients as [number, number, number];
  // Three parameters are fitted: that many independent points say nothing of the scatter.
  const scaled = (sigma * sigma * points.length) / Math.max(1, independent - 3);
  const ua = Math.sqrt(Math.max(0, (fit.inverseNormal[1]?.[1] ?? 0) * scaled));
  const ub = Math.sqrt(Math.max(0, (fit.inverseNormal[2]?.[2] ?? 0) * scaled));
  const slope = name === 'line' ? a : a * FLAT_CUT_MEAN_SLOPE;
  const slopeUncertainty = name === 'line' ? ua : ua * FLAT_CUT_MEAN_SLOPE;
  let tilt: SingleFit['tilt'] = null;
  if (name === 'flat') {
    const bTrue = b - bow.mean;
    const uB = Math.hypot(ub, bow.sigma);
    const size = Math.hypot(a, bTrue);
    const uSize = size > 1e-9 ? Math.hypot((a / size) * ua, (bTrue / size) * uB) : Math.hypot(ua, uB);
    tilt = { deg: radToDeg(Math.atan(size)), uncertaintyDeg: radToDeg(uSize / (1 + size * size)) };
  }
  const cosTheta2 = 1 / (1 + slope * slope);
  return {
    name,
    planeAngleDeg: radToDeg(Math.atan(slope)),
    slopeUncertaintyDeg: radToDeg(slopeUncertainty * cosTheta2),
    tilt,
    residuals: fit.residuals,
    scatter: sigma,
    independent,
    // The bow of a helix is held by its prior: it counts as a parameter only as far as the photo moves it.
    parameters: name === 'line' ? 2.2 : 3,
    sse:
      fit.residuals.reduce((sum, r) => sum + Math.min(r * r, 9 * sigma * sigma), 0) * cosTheta2 +
      (name === 'line' ? ((b - bow.mean) / bow.sigma) ** 2 * (FLOOR * FLOOR) : 0),
    curve: Array.from({ length: 61 }, (_, i) => {
      const lo = points.reduce((m, p) => Math.min(m, p.phi), 9);
      const hi = points.reduce((m, p) => Math.max(m, p.phi), -9);
      const phi = lo + ((hi - lo) * i) / 60;
      return { x: c + a * (name === 'line' ? phi : Math.sin(phi)) + b * Math.cos(phi), phi };
    }),
  };
}

/** Straight line through a steep trace: s(x), so that 90° is no singularity. */
function fitSteep(points: readonly SurfacePoint[], independentLimit: number): SingleFit | null {
  const y = columnOf(points, (p) => p.phi);
  const fit = fitLinear([columnOf(points, () => 1), columnOf(points, (p) => p.x)], y);
  if (fit === null) return null;
  const [c, m] = fit.coefficients as [number, number];
  const sigma = Math.max(FLOOR, Math.sqrt((fit.rms ** 2 + fit.robustSigma ** 2) / 2));
  const independent = Math.max(3, Math.min(independentLimit, points.length / correlationFactor(fit.residuals)));
  const um = Math.sqrt(((fit.inverseNormal[1]?.[1] ?? 0) * sigma * sigma * points.length) / independent);
  const xs = points.map((p) => p.x);
  const lo = Math.min(...xs);
  const hi = Math.max(...xs);
  return {
    name: 'line',
    planeAngleDeg: wrapPlaneAngleDeg(90 - radToDeg(Math.atan(m))),
    slopeUncertaintyDeg: radToDeg(um / (1 + m * m)),
    tilt: null,
    residuals: fit.residuals,
    scatter: sigma,
    independent,
    parameters: 2,
    sse: fit.residuals.reduce((sum, r) => sum + Math.min(r * r, 9 * sigma * sigma), 0) / (1 + m * m),
    curve: Array.from({ length: 31 }, (_, i) => {
      const x = lo + ((hi - lo) * i) / 30;
      return { x, phi: c + m * x };
    }),
  };
}

/** How much better several pieces must be than one shape to be believed (BIC difference; Kass and Raftery 1995: above 6 strong, above 10 very strong). */
const PIECES_MARGIN = 10;

const STEEP_DEG = 67.5;
const FLAT_DEG = 22.5;

/** Least-squares line through one piece, corners left out; steep pieces as s(x). */
function refinePiece(
  points: readonly SurfacePoint[],
  piece: StraightPiece,
  independentLimit: number,
): SingleFit | null {
  const trim = Math.min(Math.floor((piece.to - piece.from) * 0.12), 4);
  const part = points.slice(piece.from + trim, piece.to + 1 - trim);
  if (part.length < 4) return null;
  if (Math.abs(piece.planeAngleDeg) > 55) return fitSteep(part, independentLimit);
  const fit = fitLinear(
    [columnOf(part, () => 1), columnOf(part, (p) => p.phi)],
    columnOf(part, (p) => p.x),
  );
  if (fit === null) return null;
  const [c, a] = fit.coefficients as [number, number];
  const sigma = Math.max(FLOOR, Math.sqrt((fit.rms ** 2 + fit.robustSigma ** 2) / 2));
  const independent = Math.max(3, Math.min(independentLimit, part.length / correlationFactor(fit.residuals)));
  const ua = Math.sqrt(((fit.inverseNormal[1]?.[1] ?? 0) * sigma * sigma * part.length) / independent);
  const first = part[0] as SurfacePoint;
  const last = part[part.length - 1] as SurfacePoint;
  return {
    name: 'line',
    planeAngleDeg: radToDeg(Math.atan(a)),
    slopeUncertaintyDeg: radToDeg(ua / (1 + a * a)),
    tilt: null,
    residuals: fit.residuals,
    scatter: sigma,
    independent,
    parameters: 2,
    sse: 0,
    curve: [first.phi, last.phi].map((phi) => ({ x: c + a * phi, phi })),
  };
}

type PieceKind = 'flat' | 'inclined' | 'steep';
const kindOf = (deg: number): PieceKind =>
  Math.abs(deg) > STEEP_DEG ? 'steep' : Math.abs(deg) < FLAT_DEG ? 'flat' : 'inclined';

/** A piece with more than this share of the trace is the trace; what is left at its ends is a ragged edge. */
const ALMOST_WHOLE = 0.86;

/** A flat cut seen from its high or low side is an arch: three pieces and more whose slopes turn one way. */
const ARCH_SCATTER = 0.06;
const isArch = (pieces: readonly StraightPiece[]): boolean => {
  if (pieces.length < 3) return false;
  const turns = pieces.slice(1).map((p, i) => p.planeAngleDeg - (pieces[i] as StraightPiece).planeAngleDeg);
  return turns.every((t) => t > 0 && t < 60) || turns.every((t) => t < 0 && t > -60);
};

/** Neighbouring pieces of one kind and hand are one segment with a bend: roughness, not a second segment. */
function mergeAlike(points: readonly SurfacePoint[], pieces: readonly StraightPiece[]): StraightPiece[] {
  const merged: StraightPiece[] = [];
  for (const piece of pieces) {
    const last = merged[merged.length - 1];
    const kind = kindOf(piece.planeAngleDeg);
    const alike =
      last !== undefined &&
      kindOf(last.planeAngleDeg) === kind &&
      (kind !== 'inclined' || Math.sign(last.planeAngleDeg) === Math.sign(piece.planeAngleDeg));
    if (!alike) {
      merged.push(piece);
      continue;
    }
    const whole = bestPieces(points.slice(last.from, piece.to + 1), 1, 3)?.[0];
    if (whole !== undefined) merged[merged.length - 1] = { ...whole, from: last.from, to: piece.to };
  }
  return merged;
}

interface Division {
  readonly pieces: readonly StraightPiece[];
  readonly score: number;
}

/** Schwarz's information criterion with the number of independent points; smaller is better. */
const criterion = (sse: number, points: number, independent: number, parameters: number) =>
  independent * Math.log(sse / points + FLOOR * FLOOR) + parameters * Math.log(independent);

function bestDivision(
  points: readonly SurfacePoint[],
  independentLimit: number,
): { division: Division | null; independent: number } {
  const minimum = Math.max(6, Math.round(points.length * 0.09));
  const most = bestPieces(points, 4, minimum) ?? bestPieces(points, 2, minimum);
  const factor = most === null ? 4 : correlationFactor(pieceResiduals(points, most));
  const independent = Math.max(6, Math.min(independentLimit, points.length / Math.max(1.5, factor)));
  let best: Division | null = null;
  for (let count = 2; count <= 4; count++) {
    const pieces = bestPieces(points, count, minimum);
    if (pieces === null) continue;
    const distinct = pieces.every(
      (p, i) => i === 0 || planeAngleDistanceDeg(p.planeAngleDeg, (pieces[i - 1] as StraightPiece).planeAngleDeg) > 18,
    );
    if (!distinct) continue;
    const sse = pieces.reduce((sum, p) => sum + p.sse, 0);
    const score = criterion(sse, points.length, independent, 3 * count - 1);
    if (best === null || score < best.score) best = { pieces, score };
  }
  return { division: best, independent };
}

/**
 * Shape and angle of a fracture trace on the unrolled surface.
 *
 * Models: a helix (straight line), a flat cut (sinusoid), two to four straight pieces; chosen by Schwarz's
 * information criterion counting independent points only. A steep piece between or beside pieces of one
 * helix is its closing step; transverse ends beside a dominant steep piece belong to a longitudinal split.
 * @param trace polyline along the trace, from one edge of the visible face towards the other
 * @param bow what the camera is expected to add to the even part
 * @param independentLimit upper bound on the number of independent points (the number of points set by hand)
 * @returns null when the trace is too short to have a direction
 */
export function fitTrace(
  trace: readonly SurfacePoint[],
  bow: CameraBow,
  independentLimit = 200,
  count = POINTS,
): TraceFit | null {
  const length = polylineLength(trace);
  if (trace.length < 2 || !(length > 0.15)) return null;
  const points = resamplePolyline(trace, count);
  const { division, independent } = bestDivision(points, independentLimit);
  const whole = bestPieces(points, 1, 3)?.[0];
  if (whole === undefined) return null;

  const singles: SingleFit[] = [];
  const face = points.filter((p) => Math.abs(p.phi) <= FACE_HALF_WIDTH);
  const spanPhi = Math.max(...points.map((p) => p.phi)) - Math.min(...points.map((p) => p.phi));
  if (Math.abs(whole.planeAngleDeg) > STEEP_DEG && spanPhi < 1) {
    const steep = fitSteep(points, independentLimit);
    if (steep !== null) singles.push(steep);
  } else {
    for (const name of ['line', 'flat'] as const) {
      const fit = fitSingle(points, name, bow, independentLimit);
      if (fit !== null) singles.push(fit);
    }
  }
  const scored = singles
    .map((fit) => ({ fit, score: criterion(fit.sse, points.length, independent, fit.parameters) }))
    .sort((a, b) => a.score - b.score);
  const bestSingle = scored[0];
  if (bestSingle === undefined) return null;

  if (division !== null && division.score < bestSingle.score - PIECES_MARGIN) {
    const pieces = mergeAlike(points, division.pieces);
    const sse = pieces.reduce((sum, p) => sum + p.sse, 0);
    const merged = criterion(sse, points.length, independent, 3 * pieces.length - 1);
    const flat = singles.find((fit) => fit.name === 'flat');
    const arch = flat !== undefined && flat.scatter < ARCH_SCATTER && isArch(pieces);
    const almostWhole = pieces.some((p) => p.to - p.from + 1 > ALMOST_WHOLE * points.length);
    if (pieces.length > 1 && !arch && !almostWhole && merged < bestSingle.score - PIECES_MARGIN) {
      const piecewise = describePieces(points, pieces, independentLimit);
      if (piecewise !== null) return piecewise;
    }
  }
  return describeSingle(points, face, scored, bow, independentLimit);
}

function describeSingle(
  points: readonly SurfacePoint[],
  face: readonly SurfacePoint[],
  scored: readonly { readonly fit: SingleFit; readonly score: number }[],
  bow: CameraBow,
  independentLimit: number,
): TraceFit {
  const line = scored.find((s) => s.fit.name === 'line');
  const flat = scored.find((s) => s.fit.name === 'flat');
  const best = scored[0] as (typeof scored)[number];
  let chosen = best.fit;
  if (line !== undefined && flat !== undefined) {
    // Where the photo cannot tell: a small angle is a flat break (a helix would need a closing step it does
    // not show), a large one a helix.
    const flatIsUsual = Math.abs(line.fit.planeAngleDeg) < FLAT_DEG;
    chosen = flat.score < line.score + (flatIsUsual ? 6 : -2) ? flat.fit : line.fit;
  }
  // The stated angle is the least-squares slope over the middle ±60°, whatever the shape.
  const middle = face.length >= 12 && chosen.curve.length > 31 ? fitSingle(face, 'line', bow, independentLimit) : null;
  const planeAngleDeg = wrapPlaneAngleDeg(middle?.planeAngleDeg ?? chosen.planeAngleDeg);
  const steep = Math.abs(planeAngleDeg) > STEEP_DEG;
  const other = scored.find((s) => s.fit !== chosen);
  const modelSpread =
    other !== undefined && Math.abs(other.score - best.score) < 6
      ? planeAngleDistanceDeg(other.fit.planeAngleDeg, chosen.planeAngleDeg) / 2
      : 0;
  const roughness = middle?.slopeUncertaintyDeg ?? chosen.slopeUncertaintyDeg;
  const shape: FractureShape = steep ? 'longitudinal' : chosen.name === 'flat' ? 'plane' : 'helix';
  return {
    shape,
    planeAngleDeg,
    planeTiltDeg: shape === 'plane' ? (chosen.tilt?.deg ?? null) : null,
    planeTiltStandardUncertaintyDeg: shape === 'plane' ? (chosen.tilt?.uncertaintyDeg ?? null) : null,
    segments: [{ planeAngleDeg, share: 1, closingStep: false, standardUncertaintyDeg: roughness }],
    roughnessUncertaintyDeg: roughness,
    modelUncertaintyDeg: modelSpread,
    scatterRadii: chosen.scatter,
    independentPoints: chosen.independent,
    curve: chosen.curve.length > 0 ? chosen.curve : points,
  };
}

function describePieces(
  points: readonly SurfacePoint[],
  pieces: readonly StraightPiece[],
  independentLimit: number,
): TraceFit | null {
  const fits: { fit: SingleFit; share: number; kind: PieceKind }[] = [];
  for (const piece of pieces) {
    const fit = refinePiece(points, piece, independentLimit);
    if (fit === null) return null;
    fits.push({ fit, share: (piece.to - piece.from + 1) / points.length, kind: kindOf(fit.planeAngleDeg) });
  }
  const share = (kind: PieceKind) => fits.reduce((sum, f) => sum + (f.kind === kind ? f.share : 0), 0);
  const inclined = fits.filter((f) => f.kind === 'inclined');
  let shape: FractureShape = 'mixed';
  let closing: PieceKind | null = null;
  if (share('steep') >= 0.3 && share('inclined') < 0.15) {
    shape = 'longitudinal';
    closing = 'flat';
  } else if (share('steep') > 0 && share('steep') < 0.7 && share('inclined') >= 0.2) {
    closing = 'steep';
    shape = share('flat') < 0.12 ? 'helix' : 'mixed';
  } else if (fits.every((f) => f.kind === (fits[0] as (typeof fits)[number]).kind)) {
    // A bend inside one mode is roughness, not a second segment, unless the hand changes.
    const angles = fits.map((f) => f.fit.planeAngleDeg);
    if (!(Math.max(...angles) > FLAT_DEG && Math.min(...angles) < -FLAT_DEG)) return null;
  }
  const governing = fits
    .filter((f) => f.kind !== closing)
    .reduce(
      (a, b) => (b.share > a.share ? b : a),
      fits.find((f) => f.kind !== closing) ?? (fits[0] as (typeof fits)[number]),
    );
  // Pieces of one helix on both sides of its closing step speak together.
  const same = fits.filter(
    (f) => f.kind === governing.kind && planeAngleDistanceDeg(f.fit.planeAngleDeg, governing.fit.planeAngleDeg) < 15,
  );
  const weights = same.map((f) => f.share ** 3);
  const totalWeight = weights.reduce((a, b) => a + b, 0);
  const offset = same.reduce(
    (sum, f, i) => sum + (weights[i] as number) * wrapPlaneAngleDeg(f.fit.planeAngleDeg - governing.fit.planeAngleDeg),
    0,
  );
  const planeAngleDeg = wrapPlaneAngleDeg(governing.fit.planeAngleDeg + offset / totalWeight);
  const uncertainty =
    Math.sqrt(same.reduce((sum, f, i) => sum + ((weights[i] as number) * f.fit.slopeUncertaintyDeg) ** 2, 0)) /
    totalWeight;
  return {
    shape,
    planeAngleDeg,
    planeTiltDeg: null,
    planeTiltStandardUncertaintyDeg: null,
    segments: fits.map((f) => ({
      planeAngleDeg: wrapPlaneAngleDeg(f.fit.planeAngleDeg),
      share: f.share,
      closingStep: f.kind === closing,
      standardUncertaintyDeg: f.fit.slopeUncertaintyDeg,
    })),
    roughnessUncertaintyDeg: uncertainty,
    modelUncertaintyDeg: 0,
    scatterRadii: medianOf(fits.map((f) => f.fit.scatter)),
    independentPoints: governing.fit.independent,
    curve: fits.flatMap((f) => f.fit.curve),
  };
}

export const tangentOf = (planeAngleDeg: number): number => Math.tan(degToRad(planeAngleDeg));

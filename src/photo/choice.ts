import { planeAngleDistanceDeg } from '../angle.ts';
import type { Candidate, EndOfHalf, HalfCandidate } from './candidates.ts';
import { ACCEPTANCE_WEIGHTS, CHOICE_WEIGHTS } from './choiceWeights.ts';
import { fitTrace, QUICK_POINTS, type TraceFit } from './traceFit.ts';
import type { SurfacePoint } from './unroll.ts';

/**
 * One way to read the photo: this candidate as a pair with a gap, or as a half with this end broken. `features` are what
 * speaks for and against it, `value` their weighted sum: of two readings of a photo the one of larger value is likelier right.
 */
export interface PhotoReading {
  readonly view: 'pair' | 'half';
  readonly candidate: Candidate;
  /** The broken end, for a half. */
  readonly end: EndOfHalf | null;
  readonly points: readonly SurfacePoint[];
  readonly fit: TraceFit | null;
  readonly features: Readonly<Record<string, number>>;
  readonly value: number;
}

/** Bow of the quick fit: nothing known of the camera's squareness yet. */
const ANY_BOW = { mean: 0, sigma: 0.08 };

const quickFit = (points: readonly SurfacePoint[]) => fitTrace(points, ANY_BOW, 200, QUICK_POINTS);

const clipped = (value: number, low: number, high: number) => Math.max(low, Math.min(high, value));

function shapeFeatures(fit: TraceFit | null): Record<string, number> {
  return {
    scatter: fit === null ? 2 : clipped(Math.log(fit.scatterRadii / 0.01), -1.5, 3),
    mixed: fit === null || fit.shape === 'mixed' ? 1 : 0,
    steep: fit !== null && fit.shape === 'longitudinal' ? 1 : 0,
    pieces: fit === null ? 4 : fit.segments.length - 1,
  };
}

function specimenFeatures(candidate: Candidate): Record<string, number> {
  const contrast = candidate.refined === null ? 1 : Math.min(...candidate.refined.contrast);
  const found = candidate.refined === null ? 0 : Math.min(...candidate.refined.found);
  return {
    ...candidate.hypothesis.terms,
    contrast: Math.log(clipped(contrast, 1, 30)),
    found,
    rank: Math.min(6, candidate.behindBest),
  };
}

export function readAsPair(candidate: Candidate): PhotoReading | null {
  const { trace } = candidate;
  if (trace === null) return null;
  const fit = quickFit(trace.points);
  const gap = -Math.log(trace.costPerRow);
  const features = {
    ...specimenFeatures(candidate),
    gap: clipped(gap, 0, 3),
    isPart: candidate.isPart ? 1 : 0,
    missingEnd: trace.missingEnd,
    missingShare: trace.missingShare,
    gapUnlike: Math.log(trace.gapUnlike + 3),
    sides: trace.gapUnlike > 0 ? clipped(Math.log((trace.gapUnlike + 3) / (trace.sidesUnlike + 3)), -1.5, 3) : 1,
    unique: clipped(Math.log(trace.secondCostPerRow / trace.costPerRow), 0, 3),
    beyondOne: clipped(-Math.log(Math.min(...trace.beyondCosts)), 0, 3),
    beyondBoth: clipped(-Math.log(Math.max(...trace.beyondCosts)), 0, 3),
    ...shapeFeatures(fit),
  };
  return {
    view: 'pair',
    candidate,
    end: null,
    points: trace.points,
    fit,
    features,
    value: weighted('pair', features),
  };
}

export function readAsHalf(half: HalfCandidate, end: EndOfHalf): PhotoReading | null {
  const { rim } = end;
  if (rim === null) return null;
  const fit = quickFit(rim.points);
  const other = half.rims.find((r) => r.end !== end.end);
  const otherFit = other?.rim == null ? null : quickFit(other.rim.points);
  const square = (f: TraceFit | null) =>
    f === null || f.shape === 'mixed' || f.shape === 'longitudinal'
      ? 0
      : Math.exp(-((f.planeAngleDeg / 4) ** 2)) * clipped(1.5 - Math.log(f.scatterRadii / 0.01) / 1.2, 0, 1);
  const { trace } = half.candidate;
  const features = {
    ...specimenFeatures(half.candidate),
    rim: Math.log(clipped(rim.contrast, 0.5, 40)),
    clear: rim.clearShare,
    sawn: square(fit),
    // The other end runs out of the photo or is sawn: then this one is the break.
    other:
      other === undefined || other.cutByPhoto
        ? 1
        : other.rim === null
          ? 0
          : square(otherFit) * Math.min(1, other.rim.clearShare),
    isPart: half.candidate.isPart ? 1 : 0,
    gap: trace === null ? 0 : clipped(-Math.log(trace.costPerRow), 0, 3),
    sides:
      trace === null || trace.gapUnlike === 0
        ? 0
        : clipped(Math.log((trace.gapUnlike + 3) / (trace.sidesUnlike + 3)), -1.5, 3),
    ...shapeFeatures(fit),
  };
  return {
    view: 'half',
    candidate: half.candidate,
    end,
    points: rim.points,
    fit,
    features,
    value: weighted('half', features),
  };
}

function weighted(view: 'pair' | 'half', features: Readonly<Record<string, number>>): number {
  const weights: Readonly<Record<string, number>> = CHOICE_WEIGHTS[view];
  let sum = weights.constant ?? 0;
  for (const [name, value] of Object.entries(features)) sum += (weights[name] ?? 0) * value;
  return sum;
}

/** The part of a reading that the comparison looks at. */
export interface ComparedReading {
  readonly view: 'pair' | 'half';
  readonly value: number;
  readonly fit: { readonly planeAngleDeg: number } | null;
  readonly features: Readonly<Record<string, number>>;
}

/** What speaks for trusting the best of the readings of a photo: its own features, its value, its lead over others that say otherwise. */
export function acceptanceFeatures(sorted: readonly ComparedReading[]): Readonly<Record<string, number>> {
  const best = sorted[0];
  if (best === undefined) return {};
  const rival = sorted.find(
    (r) =>
      r.fit === null ||
      best.fit === null ||
      r.view !== best.view ||
      planeAngleDistanceDeg(r.fit.planeAngleDeg, best.fit.planeAngleDeg) > 6,
  );
  const own = Object.fromEntries(Object.entries(best.features).map(([name, v]) => [`${best.view}.${name}`, v]));
  return {
    ...own,
    half: best.view === 'half' ? 1 : 0,
    value: best.value,
    lead: rival === undefined ? 4 : clipped(best.value - rival.value, 0, 4),
  };
}

/** Probability that the best of the readings is right, 0 to 1 (logistic regression on rendered photos). */
export function acceptance(sorted: readonly ComparedReading[]): number {
  const features = acceptanceFeatures(sorted);
  let sum = ACCEPTANCE_WEIGHTS.constant ?? 0;
  for (const [name, value] of Object.entries(features)) sum += (ACCEPTANCE_WEIGHTS[name] ?? 0) * value;
  return 1 / (1 + Math.exp(-sum));
}

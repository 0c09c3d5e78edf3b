import { detectSpecimens, type SpecimenHypothesis, scaleFrame } from './detectSpecimen.ts';
import { compareTrace, type PairTrace, SEARCHED_HALF_WIDTH, searchPairTrace } from './pairTrace.ts';
import { type Picture, shrink } from './picture.ts';
import { type RefinedFrame, refineFrame } from './refineFrame.ts';
import { insidePhoto, type RimTrace, searchRim } from './rimTrace.ts';
import type { SpecimenFrame } from './unroll.ts';

/** Radius, picture px, at which candidates are compared: enough to see a gap, small enough to be quick. */
const COMPARED_RADIUS_PX = 32;
const MOST_HYPOTHESES = 10;
const MOST_HALVES = 6;
/** Steps of the map in which rims are searched, a radius: the rim bounds a region, it needs no fine steps. */
const RIM_STEPS = 26;
/** Widths of gap looked for, in steps of the compared map: from a crack to a third of the diameter. */
const GAP_SIZES = [3, 5, 9, 17];

/** A place where a specimen may lie, its edges fitted, with the best gap across it. Frame in px of the picture given. */
export interface Candidate {
  readonly hypothesis: SpecimenHypothesis;
  readonly frame: SpecimenFrame;
  readonly refined: RefinedFrame | null;
  /** Stretch with both edges, radii from the frame's origin. */
  readonly fromX: number;
  readonly toX: number;
  readonly trace: PairTrace | null;
  readonly pairValue: number;
  /** True when a wider candidate is crossed wholly by the same gap: this one is a part of a specimen. */
  readonly isPart: boolean;
  /** How far its score as a specimen is behind the best one's of the photo. */
  readonly behindBest: number;
}

export interface HalfCandidate {
  readonly candidate: Candidate;
  readonly rims: readonly EndOfHalf[];
}

export interface EndOfHalf {
  readonly end: 1 | -1;
  /** The specimen runs out of the photo here: no end to see. */
  readonly cutByPhoto: boolean;
  readonly rim: RimTrace | null;
}

/** Value of a candidate as a pair: how like a specimen it looks, and how clear and whole a gap runs across it. */
function valueOfPair(hypothesis: SpecimenHypothesis, refined: RefinedFrame | null, trace: PairTrace | null): number {
  const gap = trace === null ? -2 : Math.min(2.5, -Math.log(trace.costPerRow)) - 2.5 * trace.missingEnd;
  const contrast = refined === null ? 1 : Math.max(1, Math.min(15, Math.min(...refined.contrast)));
  return hypothesis.score + gap + 0.5 * Math.log(contrast);
}

/** Candidates of a photo, best pair first. */
export function findCandidates(picture: Picture, levels: Levels = levelsOf(picture)): Candidate[] {
  const hypotheses = detectSpecimens(picture, MOST_HYPOTHESES);
  const best = hypotheses.reduce((m, h) => Math.max(m, h.score), Number.NEGATIVE_INFINITY);
  const candidates = hypotheses
    .map((hypothesis) => candidateOf(levels, hypothesis, best))
    .sort((a, b) => b.pairValue - a.pairValue);
  // The two best are given the chance to be only a part of the specimen.
  for (const start of candidates.slice(0, 2)) {
    const whole = widened(start, candidates, levels, best);
    if (!candidates.includes(whole)) candidates.push(whole);
  }
  return candidates
    .map((c) => ({ ...c, isPart: candidates.some((d) => d !== c && contains(d.frame, c.frame) && crossedAlike(d, c)) }))
    .sort((a, b) => b.pairValue - a.pairValue);
}

/** The picture reduced by a whole factor, made once. */
export type Levels = (factor: number) => Picture;

export function levelsOf(picture: Picture): Levels {
  const made = new Map<number, Picture>();
  return (factor) => {
    const known = made.get(factor);
    if (known !== undefined) return known;
    const picked = shrink(picture, factor);
    made.set(factor, picked);
    return picked;
  };
}

function candidateOf(levels: Levels, hypothesis: SpecimenHypothesis, bestScore: number): Candidate {
  const factor = Math.max(1, Math.floor(hypothesis.frame.radiusPx / COMPARED_RADIUS_PX));
  const small = levels(factor);
  const start = scaleFrame(hypothesis.frame, 1 / factor);
  const fromPx = hypothesis.fromPx / factor;
  const toPx = hypothesis.toPx / factor;
  const refined = refineFrame(small, start, fromPx, toPx, Math.max(2.5, 0.12 * start.radiusPx));
  const frame = refined?.frame ?? start;
  const fromX = fromPx / frame.radiusPx;
  const toX = toPx / frame.radiusPx;
  const found = searchPairTrace(small, frame, {
    fromX,
    toX,
    stepRadii: Math.max(1 / COMPARED_RADIUS_PX, 1 / frame.radiusPx),
    gapSizes: GAP_SIZES,
  });
  const trace = found === null ? null : compareTrace(small, frame, found);
  return {
    behindBest: Math.max(0, bestScore - hypothesis.score),
    isPart: false,
    hypothesis,
    frame: scaleFrame(frame, factor),
    refined,
    fromX,
    toX,
    trace,
    pairValue: valueOfPair(hypothesis, refined, trace),
  };
}

/**
 * A gap runs over the whole specimen. When it runs on beyond the edges of a candidate, those edges were those of a
 * highlight or a shade: the widest candidate that is crossed wholly, and in the same way, is the specimen. (In a
 * shadow on the ground the gap is missing, or light where it is dark on the specimen.)
 */
function widened(start: Candidate, candidates: readonly Candidate[], levels: Levels, bestScore: number): Candidate {
  let best = start;
  for (let round = 0; round < 2; round++) {
    // Only a gap that runs on is followed outwards.
    if (best.trace === null || Math.min(...best.trace.beyondCosts) > RUNS_ON) break;
    const wider = [...candidates, ...best.hypothesis.wider().map((h) => candidateOf(levels, h, bestScore))]
      .filter((c) => c !== best && contains(c.frame, best.frame) && crossedAlike(c, best))
      .sort((a, b) => b.pairValue - a.pairValue)[0];
    if (wider === undefined) break;
    best = wider;
  }
  return best;
}

/** Continuation below this cost a row is taken for the same gap. */
const RUNS_ON = 0.6;

function contains(outer: SpecimenFrame, inner: SpecimenFrame): boolean {
  const turn = Math.abs(outer.alongX * inner.alongY - outer.alongY * inner.alongX);
  const up =
    (inner.originPx.xPx - outer.originPx.xPx) * outer.alongY - (inner.originPx.yPx - outer.originPx.yPx) * outer.alongX;
  const ratio = inner.radiusPx / outer.radiusPx;
  return turn < 0.05 && ratio < 0.93 && Math.abs(up) / outer.radiusPx + ratio < 1.06;
}

const MOST_MISSING_END = 0.12;

function crossedAlike(outer: Candidate, inner: Candidate): boolean {
  const a = outer.trace;
  const b = inner.trace;
  if (a === null || b === null || a.missingEnd > MOST_MISSING_END || a.costPerRow > b.costPerRow + 0.25) return false;
  if (outer.hypothesis.score < inner.hypothesis.score - 2) return false;
  // The rows beyond the inner candidate, and those inside it.
  const up =
    ((inner.frame.originPx.xPx - outer.frame.originPx.xPx) * outer.frame.alongY -
      (inner.frame.originPx.yPx - outer.frame.originPx.yPx) * outer.frame.alongX) /
    outer.frame.radiusPx;
  const ratio = inner.frame.radiusPx / outer.frame.radiusPx;
  const beyond = { n: 0, cost: 0, dark: 0 };
  const inside = { n: 0, cost: 0, dark: 0 };
  for (let r = 0; r < a.map.rows; r++) {
    const height = Math.sin(a.map.firstPhi + r * a.map.stepRadii);
    const part = Math.abs(height - up) > ratio ? beyond : inside;
    part.n += 1;
    part.cost += a.rowCosts[r] as number;
    if ((a.rowDepths[r] as number) > 0) part.dark += 1;
  }
  if (beyond.n < 3 || inside.n < 3) return false;
  const darkBeyond = beyond.dark / beyond.n;
  const darkInside = inside.dark / inside.n;
  return (
    beyond.cost / beyond.n < Math.max(0.45, inside.cost / inside.n + 0.2) && Math.abs(darkBeyond - darkInside) < 0.5
  );
}

/** The candidates most like a specimen, with what is seen at their ends. */
export function findHalves(levels: Levels, candidates: readonly Candidate[]): HalfCandidate[] {
  const likely = [...candidates].sort((a, b) => b.hypothesis.score - a.hypothesis.score).slice(0, MOST_HALVES);
  return likely.map((candidate) => {
    const factor = Math.max(1, Math.floor(candidate.frame.radiusPx / COMPARED_RADIUS_PX));
    const small = levels(factor);
    const frame = scaleFrame(candidate.frame, 1 / factor);
    const rims = ([1, -1] as const).map((end): EndOfHalf => {
      const x = end === 1 ? candidate.toX : candidate.fromX;
      const runsOut = ![-1, 0, 1].every((side) =>
        insidePhoto(small, frame, { x: x + end * 0.4, phi: side * SEARCHED_HALF_WIDTH }, 1),
      );
      if (runsOut) return { end, cutByPhoto: true, rim: null };
      const rim = searchRim(small, frame, candidate, end, Math.max(1 / RIM_STEPS, 1 / frame.radiusPx));
      return { end, cutByPhoto: rim === null, rim };
    });
    return { candidate, rims };
  });
}

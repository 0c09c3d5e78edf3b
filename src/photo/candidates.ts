import { detectSpecimens, type SpecimenHypothesis, scaleFrame } from './detectSpecimen.ts';
import { type PairTrace, SEARCHED_HALF_WIDTH, searchPairTrace } from './pairTrace.ts';
import { type Picture, shrink } from './picture.ts';
import { type RefinedFrame, refineFrame } from './refineFrame.ts';
import { insidePhoto, type RimTrace, searchRim } from './rimTrace.ts';
import type { SpecimenFrame } from './unroll.ts';

/** Radius, picture px, at which candidates are compared: enough to see a gap, small enough to be quick. */
const COMPARED_RADIUS_PX = 40;
const MOST_HYPOTHESES = 10;
const MOST_HALVES = 4;

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
export function findCandidates(picture: Picture): Candidate[] {
  const candidates: Candidate[] = [];
  const levels = new Map<number, Picture>();
  const level = (factor: number): Picture => {
    const known = levels.get(factor);
    if (known !== undefined) return known;
    const made = shrink(picture, factor);
    levels.set(factor, made);
    return made;
  };
  for (const hypothesis of detectSpecimens(picture, MOST_HYPOTHESES)) {
    const factor = Math.max(1, Math.floor(hypothesis.frame.radiusPx / COMPARED_RADIUS_PX));
    const small = level(factor);
    const start = scaleFrame(hypothesis.frame, 1 / factor);
    const fromPx = hypothesis.fromPx / factor;
    const toPx = hypothesis.toPx / factor;
    const refined = refineFrame(small, start, fromPx, toPx, Math.max(2.5, 0.12 * start.radiusPx));
    const frame = refined?.frame ?? start;
    const fromX = fromPx / frame.radiusPx;
    const toX = toPx / frame.radiusPx;
    const trace = searchPairTrace(small, frame, {
      fromX,
      toX,
      stepRadii: Math.max(1 / COMPARED_RADIUS_PX, 1 / frame.radiusPx),
      gapSizes: [3, 5, 9],
    });
    candidates.push({
      hypothesis,
      frame: scaleFrame(frame, factor),
      refined,
      fromX,
      toX,
      trace,
      pairValue: valueOfPair(hypothesis, refined, trace),
    });
  }
  return candidates.sort((a, b) => b.pairValue - a.pairValue);
}

/** The candidates most like a specimen, with what is seen at their ends. */
export function findHalves(picture: Picture, candidates: readonly Candidate[]): HalfCandidate[] {
  const likely = [...candidates].sort((a, b) => b.hypothesis.score - a.hypothesis.score).slice(0, MOST_HALVES);
  return likely.map((candidate) => {
    const factor = Math.max(1, Math.floor(candidate.frame.radiusPx / COMPARED_RADIUS_PX));
    const small = shrink(picture, factor);
    const frame = scaleFrame(candidate.frame, 1 / factor);
    const rims = ([1, -1] as const).map((end): EndOfHalf => {
      const x = end === 1 ? candidate.toX : candidate.fromX;
      const runsOut = ![-1, 0, 1].every((side) =>
        insidePhoto(small, frame, { x: x + end * 0.4, phi: side * SEARCHED_HALF_WIDTH }, 1),
      );
      if (runsOut) return { end, cutByPhoto: true, rim: null };
      const rim = searchRim(small, frame, candidate, end, Math.max(1 / COMPARED_RADIUS_PX, 1 / frame.radiusPx));
      return { end, cutByPhoto: false, rim };
    });
    return { candidate, rims };
  });
}

import type { PredictedPlane } from '../mechanics/stressState.ts';
import type { PlaneReading, TraceSegment } from '../records/reading.ts';
import { planeAngleProbabilities } from './cells.ts';
import type { DecisionRule } from './model.ts';
import { likeliestOf, modeProbabilitiesOf, type PlaneMode } from './modeProbabilities.ts';

/** A part of the trace whose own mode is decided. */
export interface SegmentMode {
  readonly mode: PlaneMode;
  readonly probability: number;
  readonly share: number;
  readonly planeAngleDeg: number;
}

/**
 * Decided segments of a trace with closing steps set aside and shares counted on what is left. The step that
 * closes a helix belongs to the normal-stress break: it is set aside when marked, and also when a trace read
 * as a helix has a longitudinal segment that nobody marked. The trace of a flat break bends around the surface
 * although the break is one plane, so its segments say nothing.
 */
export function segmentModes(
  planes: readonly PredictedPlane[],
  reading: PlaneReading,
  rule: DecisionRule,
): SegmentMode[] {
  if (reading.shape === 'plane' || reading.segments.length < 2) return [];
  const judged = reading.segments
    .filter((segment) => segment.closingStep !== true)
    .map((segment) => ({ segment, ...modeOfSegment(planes, segment, reading) }));
  const kept = judged.filter(
    ({ segment, mode }) =>
      !(reading.shape === 'helix' && segment.closingStep === undefined && mode === 'shear-longitudinal'),
  );
  const total = kept.reduce((sum, { segment }) => sum + segment.share, 0);
  if (!(total > 0)) return [];
  return kept
    .map(({ segment, mode, probability }) => ({
      mode,
      probability,
      share: segment.share / total,
      planeAngleDeg: segment.planeAngleDeg,
    }))
    .filter(({ probability }) => probability >= rule.minimumProbability);
}

function modeOfSegment(planes: readonly PredictedPlane[], segment: TraceSegment, reading: PlaneReading) {
  const expanded = segment.expandedUncertaintyDeg ?? reading.expandedUncertaintyDeg;
  const u = expanded / reading.coverageFactor;
  const probabilities = modeProbabilitiesOf(planeAngleProbabilities(planes, segment.planeAngleDeg, u));
  const mode = likeliestOf(probabilities);
  return { mode, probability: probabilities[mode] };
}

/** The two largest segments of different modes that each have the share the rule asks for; null when there are none. */
export function mixedPair(
  segments: readonly SegmentMode[],
  rule: DecisionRule,
): readonly [SegmentMode, SegmentMode] | null {
  const large = segments.filter((s) => s.share >= rule.minimumSegmentShare).sort((a, b) => b.share - a.share);
  const [first] = large;
  const second = large.find((s) => s.mode !== first?.mode);
  return first && second ? [first, second] : null;
}

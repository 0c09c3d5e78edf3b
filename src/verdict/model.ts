/** The words and shapes of a failure-mode statement. The rule itself is in failureMode.ts. */

import type { PredictedPlane, PredictedPlaneName, SurfaceStress } from '../mechanics/stressState.ts';

export type FailureMode =
  | 'shear-transverse'
  | 'shear-longitudinal'
  | 'normal-stress'
  | 'mixed'
  | 'indeterminate'
  | 'not-attributable';

export type { PredictedPlane, PredictedPlaneName, SurfaceStress };

export interface DecisionRule {
  /** A mode is stated when its probability reaches this; 0.5 to 1. */
  readonly minimumProbability: number;
  /** `mixed` when two segments of different modes each have at least this share of the trace. */
  readonly minimumSegmentShare: number;
}
export const DEFAULT_DECISION_RULE: DecisionRule = { minimumProbability: 0.95, minimumSegmentShare: 0.25 };

export interface CellProbability {
  readonly plane: PredictedPlaneName;
  readonly planeAngleDeg: number;
  /** Cell limits, degrees; `toDeg` may exceed 90 for the cell that crosses the wrap. */
  readonly fromDeg: number;
  readonly toDeg: number;
  readonly probability: number;
}

export type EvidenceSign = 'supports' | 'neutral' | 'contradicts';
export interface Evidence {
  readonly code: string;
  readonly sign: EvidenceSign;
  /** One sentence a technician understands. */
  readonly sentence: string;
  /** The numbers behind it, unit in the name. */
  readonly numbers: Readonly<Record<string, number>>;
}

export interface FailureModeStatement {
  readonly mode: FailureMode;
  /** Probability of the stated mode (of the likeliest one when `indeterminate`), 0 to 1. */
  readonly probability: number;
  readonly likeliestMode: 'shear-transverse' | 'shear-longitudinal' | 'normal-stress';
  readonly modeProbabilities: Readonly<Record<'shear-transverse' | 'shear-longitudinal' | 'normal-stress', number>>;
  readonly cells: readonly CellProbability[];
  /** What was compared with the planes: θ, or the tilt β of a flat break. */
  readonly comparedQuantity: 'planeAngle' | 'planeTilt';
  readonly comparedDeg: number;
  readonly comparedExpandedUncertaintyDeg: number;
  readonly nearestPlane: {
    readonly plane: PredictedPlaneName;
    readonly planeAngleDeg: number;
    readonly distanceDeg: number;
  };
  readonly rule: DecisionRule;
  /** The rule in words, printed on every result. */
  readonly ruleText: string;
  /** Why the mode is `indeterminate`, `mixed` or `not-attributable`; null otherwise. */
  readonly reason: { readonly code: string; readonly message: string } | null;
  readonly evidence: readonly Evidence[];
}

/** The shear stress a report quotes, and what it means. */
export interface ShearStressValue {
  /** "elastic torsional strength T·r/J" or "fully plastic estimate". */
  readonly kind: 'elastic' | 'fully-plastic';
  readonly shearStressMPa: number;
  readonly label: string;
}

/** Everything that follows from one test and its readings; pure, so the page computes it live. */
export interface Assessment {
  /** Null when no torque is known; the planes are then those of pure torsion in the stated direction. */
  readonly stress: {
    readonly surface: SurfaceStress;
    readonly elastic: ShearStressValue;
    readonly fullyPlastic: ShearStressValue;
    readonly quoted: ShearStressValue;
    readonly sigma1MPa: number;
    readonly sigma2MPa: number;
    readonly maxShearMPa: number;
  } | null;
  /** The state the planes were predicted with (unit shear stress when no torque is known). */
  readonly planesFor: SurfaceStress;
  readonly planes: readonly PredictedPlane[];
  /** Id of the reading the statement rests on; null when there is none to rest on. */
  readonly readingId: string | null;
  readonly statement: FailureModeStatement | null;
  /** Sentences about what was assumed or is missing. */
  readonly notes: readonly string[];
}

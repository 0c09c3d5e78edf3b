import { handOfPlaneAngle, planeAngleDistanceDeg } from '../angle.ts';
import type { PlaneReading } from '../records/reading.ts';
import type { TorqueDirection } from '../records/test.ts';
import { type Compared, comparedOf } from './failureMode.ts';
import type { Evidence, EvidenceSign, FailureModeStatement } from './model.ts';
import { degreesText, fixedText, PLANE_TITLES } from './wording.ts';

/** A reading other than the one the statement rests on. */
export interface OtherReading {
  readonly reading: PlaneReading;
  readonly name: string;
  /** Taken from the same photo: a correction, not an independent second measurement. */
  readonly samePhoto: boolean;
}

/** What the evidence lines look at. */
export interface EvidenceCase {
  readonly statement: Omit<FailureModeStatement, 'evidence'>;
  readonly reading: PlaneReading;
  readonly torqueDirection: TorqueDirection | null;
  readonly others: readonly OtherReading[];
}

/**
 * Further from its plane than this AND than twice its expanded uncertainty, a break asks for an explanation.
 * Common practice: alignment and stray bending of a few per cent turn the planes by two or three degrees.
 */
const UNEXPLAINED_DISTANCE_DEG = 5;

/** The lines that agree or disagree with the statement, in a fixed order. */
export function evidenceOf(evidenceCase: EvidenceCase): Evidence[] {
  const lines = [
    handAgainstDirection(evidenceCase),
    distanceFromNearestPlane(evidenceCase.statement),
    ...evidenceCase.others.map((other) => agreementWith(other, evidenceCase.reading)),
  ];
  return lines.filter((line) => line !== null);
}

const DIRECTION_WORDS = { ccw: 'counter-clockwise', cw: 'clockwise' } as const;
const LEAN = {
  left: 'leans like "/" (left-hand)',
  right: 'leans like "\\" (right-hand)',
  none: 'has no lean',
} as const;

/**
 * A normal-stress break leans with the tension plane of the recorded direction; on the compression plane it
 * contradicts it. Shear breaks and flat breaks have no hand to compare.
 */
function handAgainstDirection({ statement, torqueDirection }: EvidenceCase): Evidence | null {
  if (statement.likeliestMode !== 'normal-stress' || statement.comparedQuantity === 'planeTilt') return null;
  const probabilityOf = (plane: 'tension' | 'compression') =>
    statement.cells.find((cell) => cell.plane === plane)?.probability ?? 0;
  const onTension = probabilityOf('tension');
  const onCompression = probabilityOf('compression');
  const numbers = {
    planeAngleDeg: statement.comparedDeg,
    tensionProbability: onTension,
    compressionProbability: onCompression,
  };
  const lean = LEAN[handOfPlaneAngle(statement.comparedDeg)];
  const code = 'hand-against-direction';
  if (torqueDirection === null) {
    const speaks = onTension >= onCompression ? 'counter-clockwise' : 'clockwise';
    const sentence = `The break ${lean}: it speaks of ${speaks} torque. No direction is recorded to compare it with.`;
    return { code, sign: 'neutral', sentence, numbers };
  }
  const words = DIRECTION_WORDS[torqueDirection];
  if (onTension >= onCompression) {
    const sentence = `The break ${lean}, as the recorded ${words} torque demands.`;
    return { code, sign: 'supports', sentence, numbers };
  }
  const sentence =
    `The break ${lean}, on the compression plane of the recorded ${words} torque: the direction is recorded wrong, ` +
    'the photo is mirrored, or the torque was reversed.';
  return { code, sign: 'contradicts', sentence, numbers };
}

function distanceFromNearestPlane(statement: Omit<FailureModeStatement, 'evidence'>): Evidence {
  const { plane, planeAngleDeg, distanceDeg } = statement.nearestPlane;
  const expanded = statement.comparedExpandedUncertaintyDeg;
  const ratio = expanded > 0 ? distanceDeg / expanded : null;
  const place = `${degreesText(distanceDeg)} from the ${PLANE_TITLES[plane]} at ${degreesText(planeAngleDeg)}`;
  const inUnits = ratio === null ? '' : `, ${fixedText(ratio, 1)} times its expanded uncertainty`;
  let sign: EvidenceSign = 'neutral';
  let meaning = 'more than its uncertainty explains, no more than scatter and alignment do';
  if (distanceDeg <= expanded) {
    sign = 'supports';
    meaning = 'within its uncertainty';
  } else if (distanceDeg > 2 * expanded && distanceDeg > UNEXPLAINED_DISTANCE_DEG) {
    sign = 'contradicts';
    meaning = 'too far for uncertainty and alignment: look for another load, the grain, or a wrong trace';
  }
  return {
    code: 'nearest-plane-distance',
    sign,
    sentence: `The break lies ${place}${inUnits}: ${meaning}.`,
    numbers: { distanceDeg, expandedUncertaintyDeg: expanded, ...(ratio === null ? {} : { distanceInU: ratio }) },
  };
}

/** Two readings agree when they differ by no more than √(U₁² + U₂²): |E_n| ≤ 1, ISO 13528 and ISO/IEC 17043. */
function agreementWith({ reading: other, name, samePhoto }: OtherReading, governing: PlaneReading): Evidence {
  const code = samePhoto ? 'correction' : 'readings-agree';
  const a = comparedOf(governing);
  const b = comparedOf(other);
  if (a.quantity !== b.quantity) {
    const sentence = `${name} is read as a ${shapeWord(b)}, this reading as a ${shapeWord(a)}: their angles are not comparable.`;
    return { code, sign: 'neutral', sentence, numbers: { otherDeg: b.valueDeg } };
  }
  const differenceDeg =
    a.quantity === 'planeTilt' ? Math.abs(a.valueDeg - b.valueDeg) : planeAngleDistanceDeg(a.valueDeg, b.valueDeg);
  const allowedDeg = Math.hypot(a.expandedUncertaintyDeg, b.expandedUncertaintyDeg);
  const numbers = { otherDeg: b.valueDeg, differenceDeg, allowedDifferenceDeg: allowedDeg };
  const values = `${name} gives ${degreesText(b.valueDeg)} ± ${degreesText(b.expandedUncertaintyDeg)}`;
  if (samePhoto) {
    const sentence = `${values} on the same photo; the two differ by ${degreesText(differenceDeg)}.`;
    return { code, sign: 'neutral', sentence, numbers };
  }
  const agrees = differenceDeg <= allowedDeg;
  const sentence = `${values}: ${agrees ? 'agrees' : 'does not agree'} within the two uncertainties (differs by ${degreesText(differenceDeg)}, allowed ${degreesText(allowedDeg)}).`;
  return { code, sign: agrees ? 'supports' : 'contradicts', sentence, numbers };
}

const shapeWord = (compared: Compared): string => (compared.quantity === 'planeTilt' ? 'flat break' : 'helix or split');

import { LabError } from '../errors.ts';
import type { TestInput } from '../records/test.ts';

export type Direction = NonNullable<TestInput['torqueDirection']>;

const fold = (text: string): string =>
  text
    .normalize('NFKD')
    .replace(/\p{M}/gu, '')
    .toLowerCase()
    .replace(/[\s_.'’-]+/g, '');

/** Words for the two directions, as seen facing the driven end; folded. */
const WORDS: Readonly<Record<Direction, readonly string[]>> = {
  ccw: [
    'ccw',
    'counterclockwise',
    'anticlockwise',
    'acw',
    'positive',
    'gegenuhrzeigersinn',
    'gegendenuhrzeigersinn',
    'antihoraire',
    'senshantihoraire',
    'antihorario',
    'antiorario',
    'przeciwnie',
    'moturs',
    '逆时针',
    '反時計回り',
  ],
  cw: [
    'cw',
    'clockwise',
    'negative',
    'imuhrzeigersinn',
    'uhrzeigersinn',
    'horaire',
    'senshoraire',
    'horario',
    'orario',
    'medurs',
    '顺时针',
    '時計回り',
  ],
};
const BY_WORD = new Map<string, Direction>([
  ...WORDS.ccw.map((word): [string, Direction] => [fold(word), 'ccw']),
  ...WORDS.cw.map((word): [string, Direction] => [fold(word), 'cw']),
]);

/** The direction a word means, facing the driven end; null for a word that is none. */
export function directionOfWord(word: string): Direction | null {
  return BY_WORD.get(fold(word)) ?? null;
}

export interface TorqueWithDirection {
  /** Magnitude, N·m, ≥ 0. */
  readonly torqueMaxNm: number;
  readonly torqueDirection: Direction | null;
}

/**
 * A signed torque: below zero it turns clockwise (facing the driven end). A sign against a stated direction is refused;
 * a torque above zero says nothing about the direction, since most logs keep magnitudes.
 * @throws LabError `contradiction`
 */
export function torqueWithDirection(
  signedTorqueNm: number,
  stated: Direction | null,
  input: string,
): TorqueWithDirection {
  if (!(signedTorqueNm < 0)) return { torqueMaxNm: signedTorqueNm, torqueDirection: stated };
  if (stated === 'ccw') {
    throw new LabError(
      'contradiction',
      `torque below zero must be clockwise (cw), got ${signedTorqueNm} N·m with direction ccw`,
      { input, value: signedTorqueNm },
    );
  }
  return { torqueMaxNm: -signedTorqueNm, torqueDirection: 'cw' };
}

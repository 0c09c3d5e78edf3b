import type { AxialSummary } from './axial.ts';
import type { StrengthSummary } from './strength.ts';
import type { WeibullFit } from './weibull.ts';

/** Fewer tests than this say little about scatter. Common practice. */
export const FEW_TESTS = 5;
/** What ASTM C1239 asks for before a Weibull modulus is used in design; from memory. */
const ENOUGH_FOR_A_MODULUS = 30;
const NO_PREFERRED_AXIS_P = 0.05;

interface Sizes {
  readonly planeAngles: AxialSummary | null;
  readonly strength: StrengthSummary | null;
  readonly weibull: WeibullFit | null;
  readonly anglesWithoutDirection: number;
}

const tests = (n: number): string => (n === 1 ? 'One test' : `${n} tests`);

function onStrength({ n }: StrengthSummary): string[] {
  if (n === 1) return ['One strength says nothing about scatter.'];
  if (n < FEW_TESTS) {
    return [
      `${tests(n)} with a strength: the intervals are so wide that they should not be compared with other groups.`,
    ];
  }
  return [];
}

function onAngles({ n, meanAxisDeg, uniformityP }: AxialSummary): string[] {
  if (n === 1) return ['One plane angle says nothing about scatter.'];
  if (meanAxisDeg === null) return ['The plane angles cancel each other: they have no mean axis.'];
  if (uniformityP > NO_PREFERRED_AXIS_P) {
    return [
      n < FEW_TESTS
        ? `${tests(n)} with a plane angle: too few to tell a preferred axis from chance.`
        : 'The plane angles show no preferred axis (Rayleigh test); their mean means nothing.',
    ];
  }
  return [];
}

function onWeibull({ n, modulusConfidence: m }: WeibullFit): string[] {
  if (!m) return [`${tests(n)}: too few for an interval of the Weibull modulus.`];
  if (n >= ENOUGH_FOR_A_MODULUS) return [];
  return [`The Weibull modulus of ${n} specimens is known only from ${m.from.toFixed(1)} to ${m.to.toFixed(1)}.`];
}

/** Sentences on what a batch is too small, or too scattered, to say. */
export function notesOnSize({ planeAngles, strength, weibull, anglesWithoutDirection }: Sizes): string[] {
  const without =
    anglesWithoutDirection === 0
      ? []
      : [
          `${tests(anglesWithoutDirection)} with a plane angle but no direction of torque: left out of the mean axis, since its hand cannot be compared.`,
        ];
  return [
    ...(strength ? onStrength(strength) : []),
    ...(planeAngles ? onAngles(planeAngles) : []),
    ...(weibull ? onWeibull(weibull) : []),
    ...without,
  ];
}

import { LabError } from '../errors.ts';
import { requirePositive } from './requirePositive.ts';

/** A change of section that raises the shear stress locally. Dimensions in mm, d the smaller diameter. */
export type StressConcentration =
  | { readonly kind: 'given'; readonly factor: number }
  | {
      readonly kind: 'shoulder-fillet' | 'circumferential-groove';
      /** D, outside diameter beside the fillet or groove. */
      readonly largerDiameterMm: number;
      /** r, fillet or groove radius. */
      readonly radiusMm: number;
    };

export interface StressConcentrationFactor {
  /** K_ts on the nominal stress 16T/(πd³) of the smaller diameter. */
  readonly factor: number;
  readonly insideValidity: boolean;
  /** Range of h/r the fit was published for; null for a given factor. */
  readonly validity: { readonly fromHeightToRadius: number; readonly toHeightToRadius: number } | null;
  readonly source: string;
}

type Fit = readonly (readonly [constant: number, root: number, linear: number])[];

/**
 * Coefficients Cᵢ = a + b √(h/r) + c (h/r) of K_ts = C1 + C2 (2h/D) + C3 (2h/D)² + C4 (2h/D)³.
 * Pilkey & Pilkey, Peterson's Stress Concentration Factors, 3rd ed. 2008, charts 3.12 (shoulder fillet) and 2.47
 * (U-shaped circumferential groove), torsion; coefficients compared with two public transcriptions. Held against
 * independent fits in test/reference/stressConcentration.csv: within 5 %, the groove beyond h/r = 10 within 7 %.
 */
const SHOULDER_FILLET: Fit = [
  [0.905, 0.783, -0.075],
  [-0.437, -1.969, 0.553],
  [1.557, 1.073, -0.578],
  [-1.061, 0.171, 0.086],
];
const GROOVE_SHALLOW: Fit = [
  [0.966, 1.056, -0.022],
  [-0.192, -4.037, 0.674],
  [0.808, 5.321, -1.231],
  [-0.567, -2.364, 0.566],
];
const GROOVE_DEEP: Fit = [
  [1.089, 0.924, 0.018],
  [-1.504, -2.141, -0.047],
  [2.486, 2.289, 0.091],
  [-1.056, -1.104, -0.059],
];

const SMALLEST_HEIGHT_TO_RADIUS = 0.25;
const LARGEST_FILLET_HEIGHT_TO_RADIUS = 4;
const GROOVE_CHANGEOVER = 2;
const LARGEST_GROOVE_HEIGHT_TO_RADIUS = 50;

/**
 * Elastic stress concentration factor in torsion at the smaller diameter d.
 * @param diameterMm d, mm, the gauge section or the bottom of the groove
 * @throws LabError `out-of-range` or `contradiction` when D ≤ d
 */
export function stressConcentrationFactor(at: StressConcentration, diameterMm: number): StressConcentrationFactor {
  if (at.kind === 'given') {
    if (at.factor >= 1 && Number.isFinite(at.factor)) {
      return { factor: at.factor, insideValidity: true, validity: null, source: 'given by the laboratory' };
    }
    throw new LabError('out-of-range', `factor must be ≥ 1, got ${at.factor}`, { input: 'factor', value: at.factor });
  }
  const { largerDiameterMm, radiusMm } = at;
  requirePositive('diameterMm', diameterMm, 'mm');
  requirePositive('largerDiameterMm', largerDiameterMm, 'mm');
  requirePositive('radiusMm', radiusMm, 'mm');
  if (!(largerDiameterMm > diameterMm)) {
    const message = `largerDiameterMm must be larger than diameterMm (${diameterMm} mm), got ${largerDiameterMm} mm`;
    throw new LabError('contradiction', message, { input: 'largerDiameterMm', value: largerDiameterMm });
  }
  const heightMm = (largerDiameterMm - diameterMm) / 2;
  const heightToRadius = heightMm / radiusMm;
  const depth = (2 * heightMm) / largerDiameterMm;
  const groove = at.kind === 'circumferential-groove';
  const fit = groove ? (heightToRadius <= GROOVE_CHANGEOVER ? GROOVE_SHALLOW : GROOVE_DEEP) : SHOULDER_FILLET;
  const to = groove ? LARGEST_GROOVE_HEIGHT_TO_RADIUS : LARGEST_FILLET_HEIGHT_TO_RADIUS;
  const root = Math.sqrt(heightToRadius);
  const factor = fit.reduce((sum, [a, b, c], power) => sum + (a + b * root + c * heightToRadius) * depth ** power, 0);
  return {
    factor: Math.max(1, factor),
    insideValidity: heightToRadius >= SMALLEST_HEIGHT_TO_RADIUS && heightToRadius <= to,
    validity: { fromHeightToRadius: SMALLEST_HEIGHT_TO_RADIUS, toHeightToRadius: to },
    source: `Peterson's Stress Concentration Factors, 3rd ed. 2008, chart ${groove ? '2.47' : '3.12'}`,
  };
}

import { wrapPlaneAngleDeg } from '../angle.ts';
import { principalStresses } from './planes.ts';
import { requirePositive } from './requirePositive.ts';
import type { SurfaceStress } from './stressState.ts';

/** Strengths that turn a criterion's stress into a utilisation; each may be unknown. MPa, > 0. */
export interface Strengths {
  readonly tensileStrengthMPa?: number | null;
  readonly shearStrengthMPa?: number | null;
  /** Magnitude. */
  readonly compressiveStrengthMPa?: number | null;
  /** Tensile yield strength, for von Mises. */
  readonly yieldStrengthMPa?: number | null;
  /** φ of Mohr–Coulomb, degrees, 0 ≤ φ < 90; from tensile and compressive strength when not given. */
  readonly frictionAngleDeg?: number | null;
}

export type CriterionName =
  | 'largest-normal-stress'
  | 'largest-shear-stress'
  | 'mohr-coulomb'
  | 'modified-mohr'
  | 'von-mises';

export interface CriterionPrediction {
  readonly criterion: CriterionName;
  readonly title: string;
  /** Planes the criterion predicts, degrees; empty when it names none. */
  readonly planeAnglesDeg: readonly number[];
  /** The stress it looks at, MPa; null when it cannot be formed from what is known. */
  readonly governingStressMPa: number | null;
  /** Share of the strength that is used, 1 at failure; null when the strength is not known. */
  readonly utilisation: number | null;
  /** What it says, in one sentence. */
  readonly sentence: string;
  readonly source: string;
}

/**
 * The criteria side by side for one surface stress state.
 * @throws LabError `out-of-range` for a strength that is not > 0
 */
export function criteriaPredictions(stress: SurfaceStress, strengths: Strengths = {}): CriterionPrediction[] {
  for (const name of [
    'tensileStrengthMPa',
    'shearStrengthMPa',
    'compressiveStrengthMPa',
    'yieldStrengthMPa',
  ] as const) {
    const value = strengths[name];
    if (value !== null && value !== undefined) requirePositive(name, value, 'MPa');
  }
  return [
    largestNormalStress(stress, strengths),
    largestShearStress(stress, strengths),
    mohrCoulomb(stress, strengths),
    modifiedMohr(stress, strengths),
    vonMises(stress, strengths),
  ];
}

const share = (stressMPa: number, strengthMPa: number | null | undefined): number | null =>
  strengthMPa ? stressMPa / strengthMPa : null;

/** Rankine: the plane of σ1 breaks when σ1 reaches the tensile strength. */
function largestNormalStress(stress: SurfaceStress, strengths: Strengths): CriterionPrediction {
  const { sigma1MPa, tensionPlaneAngleDeg } = principalStresses(stress);
  const pulls = sigma1MPa > 0;
  return {
    criterion: 'largest-normal-stress',
    title: 'largest normal stress (Rankine)',
    planeAnglesDeg: pulls && tensionPlaneAngleDeg !== null ? [tensionPlaneAngleDeg] : [],
    governingStressMPa: sigma1MPa,
    utilisation: pulls ? share(sigma1MPa, strengths.tensileStrengthMPa) : 0,
    sentence: pulls
      ? 'Breaks square to the largest tensile stress.'
      : 'No plane is pulled open: the criterion does not apply to this state.',
    source: 'Dowling, Mechanical Behavior of Materials, maximum normal stress criterion',
  };
}

/**
 * Tresca: the planes of the largest shear stress. When both principal stresses have one sign, the largest shear
 * lies on planes inclined to the surface, which no plane angle describes; that is said.
 */
function largestShearStress(stress: SurfaceStress, strengths: Strengths): CriterionPrediction {
  const { sigma1MPa, sigma2MPa, maxShearMPa, tensionPlaneAngleDeg } = principalStresses(stress);
  const outOfPlaneMPa = Math.max(Math.abs(sigma1MPa), Math.abs(sigma2MPa)) / 2;
  const inPlane = maxShearMPa >= outOfPlaneMPa;
  const planes =
    inPlane && tensionPlaneAngleDeg !== null
      ? [wrapPlaneAngleDeg(tensionPlaneAngleDeg - 45), wrapPlaneAngleDeg(tensionPlaneAngleDeg + 45)]
      : [];
  const governing = Math.max(maxShearMPa, outOfPlaneMPa);
  return {
    criterion: 'largest-shear-stress',
    title: 'largest shear stress (Tresca)',
    planeAnglesDeg: planes,
    governingStressMPa: governing,
    utilisation: share(governing, strengths.shearStrengthMPa),
    sentence: inPlane
      ? 'Slides on one of the two planes of the largest shear stress.'
      : 'The largest shear stress lies on planes inclined to the surface; no plane angle describes them.',
    source: 'Dowling, Mechanical Behavior of Materials, maximum shear stress criterion',
  };
}

/** φ of Mohr–Coulomb from tensile and compressive strength: sin φ = (S_c − S_t)/(S_c + S_t). Degrees; null if unknown. */
export function frictionAngleDeg(strengths: Strengths): number | null {
  const { frictionAngleDeg: given, tensileStrengthMPa: tensile, compressiveStrengthMPa: compressive } = strengths;
  if (given !== null && given !== undefined) return given;
  if (!tensile || !compressive || compressive < tensile) return null;
  return (Math.asin((compressive - tensile) / (compressive + tensile)) * 180) / Math.PI;
}

/**
 * Mohr–Coulomb: |τnt| + σn tan φ = c; the normals of the planes lie 45° − φ/2 from the tensile principal direction
 * (in pure torsion at φ/2 and 90° − φ/2). Utilisation σ1/S_t − σ3/S_c, or (|τ| + σn tan φ)/c with c = S_s/cos φ.
 */
function mohrCoulomb(stress: SurfaceStress, strengths: Strengths): CriterionPrediction {
  const phiDeg = frictionAngleDeg(strengths);
  const shared = {
    criterion: 'mohr-coulomb',
    title: 'Mohr–Coulomb',
    source: 'Jaeger & Cook, Fundamentals of Rock Mechanics; Dowling, Coulomb–Mohr criterion',
  } as const;
  if (phiDeg === null || !(phiDeg >= 0 && phiDeg < 90)) {
    const sentence = 'Needs the friction angle, or the tensile and the compressive strength.';
    return { ...shared, planeAnglesDeg: [], governingStressMPa: null, utilisation: null, sentence };
  }
  const { sigma1MPa, sigma2MPa, maxShearMPa, tensionPlaneAngleDeg } = principalStresses(stress);
  const inSurface = sigma1MPa >= 0 && sigma2MPa <= 0 && tensionPlaneAngleDeg !== null;
  const phi = (phiDeg * Math.PI) / 180;
  const mean = (sigma1MPa + sigma2MPa) / 2;
  const turn = 45 - phiDeg / 2;
  // Largest of |τ| + σn tan φ over all planes, on the planes named: (R + mean sin φ)/cos φ.
  const governing = (maxShearMPa + mean * Math.sin(phi)) / Math.cos(phi);
  const { tensileStrengthMPa: tensile, compressiveStrengthMPa: compressive, shearStrengthMPa: shear } = strengths;
  const utilisation =
    tensile && compressive
      ? Math.max(sigma1MPa, 0) / tensile - Math.min(sigma2MPa, 0) / compressive
      : share(governing * Math.cos(phi), shear);
  return {
    ...shared,
    planeAnglesDeg: inSurface
      ? [wrapPlaneAngleDeg(tensionPlaneAngleDeg - turn), wrapPlaneAngleDeg(tensionPlaneAngleDeg + turn)]
      : [],
    governingStressMPa: inSurface ? governing : null,
    utilisation,
    sentence: inSurface
      ? `Slides on planes ${turn.toFixed(1)}° from the tension plane: friction angle ${phiDeg.toFixed(1)}°.`
      : 'Both principal stresses have one sign: its planes are inclined to the surface.',
  };
}

/**
 * Modified Mohr for cast irons: while |σ2| ≤ σ1 the tension plane breaks at the tensile strength; beyond that the
 * compression takes part: (S_c − S_t) σ1/(S_c S_t) − σ2/S_c = 1.
 */
function modifiedMohr(stress: SurfaceStress, strengths: Strengths): CriterionPrediction {
  const { sigma1MPa, sigma2MPa, tensionPlaneAngleDeg } = principalStresses(stress);
  const { tensileStrengthMPa: tensile, compressiveStrengthMPa: compressive } = strengths;
  const tensionGoverns = sigma1MPa > 0 && -sigma2MPa <= sigma1MPa;
  let utilisation: number | null = null;
  if (tensionGoverns) utilisation = share(sigma1MPa, tensile);
  else if (tensile && compressive && sigma1MPa > 0) {
    utilisation = ((compressive - tensile) * sigma1MPa) / (compressive * tensile) - sigma2MPa / compressive;
  } else if (sigma1MPa <= 0) utilisation = share(-sigma2MPa, compressive);
  return {
    criterion: 'modified-mohr',
    title: 'modified Mohr (cast iron)',
    planeAnglesDeg: tensionGoverns && tensionPlaneAngleDeg !== null ? [tensionPlaneAngleDeg] : [],
    governingStressMPa: sigma1MPa,
    utilisation,
    sentence: tensionGoverns
      ? 'Tension governs: breaks on the tension plane at the tensile strength.'
      : 'Compression takes part: the criterion gives a load but no single plane.',
    source: "Budynas & Nisbett, Shigley's Mechanical Engineering Design, modified Mohr criterion",
  };
}

/** von Mises equivalent stress of a plane stress state, MPa. */
export const vonMisesStressMPa = ({ sigmaXMPa, sigmaYMPa, tauMPa }: SurfaceStress): number =>
  Math.sqrt(sigmaXMPa ** 2 - sigmaXMPa * sigmaYMPa + sigmaYMPa ** 2 + 3 * tauMPa ** 2);

function vonMises(stress: SurfaceStress, strengths: Strengths): CriterionPrediction {
  const governing = vonMisesStressMPa(stress);
  return {
    criterion: 'von-mises',
    title: 'von Mises',
    planeAnglesDeg: [],
    governingStressMPa: governing,
    utilisation: share(governing, strengths.yieldStrengthMPa),
    sentence: 'Says when yielding starts; it names no plane.',
    source: 'any text on plasticity; in pure torsion τ = σ_y/√3',
  };
}

import { predictedPlanes, principalStresses } from '../mechanics/planes.ts';
import type { PredictedPlane, SurfaceStress } from '../mechanics/stressState.ts';
import { surfaceStressOf, type TestLoads, torqueSign } from '../mechanics/surfaceStress.ts';
import { elasticShearStressMPa, fullyPlasticShearStressMPa } from '../mechanics/torsion.ts';
import type { Assessment, ShearStressValue } from './model.ts';

/** The mechanics half of an assessment: stress, planes, and what had to be assumed. */
export type StressSummary = Pick<Assessment, 'stress' | 'planesFor' | 'planes' | 'notes'>;

/** Stress state, predicted planes and notes from the loads of a test. @throws LabError for loads that cannot be */
export function stressSummaryOf(loads: TestLoads): StressSummary {
  const surface = surfaceStressOf(loads);
  const planesFor: SurfaceStress = surface ?? {
    sigmaXMPa: 0,
    sigmaYMPa: 0,
    tauMPa: torqueSign(loads.torqueDirection),
  };
  const planes: readonly PredictedPlane[] = predictedPlanes(planesFor);
  return { stress: surface ? stressOf(loads, surface) : null, planesFor, planes, notes: notesOn(loads, planes) };
}

function stressOf(loads: TestLoads, surface: SurfaceStress): Assessment['stress'] {
  const { geometry, torqueMaxNm } = loads;
  if (!geometry || torqueMaxNm === null || torqueMaxNm === undefined) return null;
  const elastic: ShearStressValue = {
    kind: 'elastic',
    shearStressMPa: elasticShearStressMPa(geometry, torqueMaxNm),
    label: 'elastic torsional strength T·r/J',
  };
  const fullyPlastic: ShearStressValue = {
    kind: 'fully-plastic',
    shearStressMPa: fullyPlasticShearStressMPa(geometry, torqueMaxNm),
    label: 'fully plastic estimate',
  };
  const { sigma1MPa, sigma2MPa, maxShearMPa } = principalStresses(surface);
  return { surface, elastic, fullyPlastic, quoted: elastic, sigma1MPa, sigma2MPa, maxShearMPa };
}

function notesOn(loads: TestLoads, planes: readonly PredictedPlane[]): string[] {
  const notes: string[] = [];
  const torqueKnown = loads.torqueMaxNm !== null && loads.torqueMaxNm !== undefined;
  if (!torqueKnown || !loads.geometry) {
    const missing = torqueKnown ? 'geometry' : 'torque';
    notes.push(`No ${missing} is known: the planes are those of pure torsion, and no stress can be stated.`);
    if (loads.axialForceN) notes.push('The axial force is left out, since the shear stress beside it is not known.');
  } else {
    notes.push('The elastic value T·r/J is quoted; once the bar has yielded it overstates the real stress.');
  }
  if (!loads.torqueDirection) {
    notes.push('The direction of the torque is not recorded; the planes are drawn for counter-clockwise torque.');
  }
  if (loads.bendingMomentNm) {
    notes.push(
      'A bending moment is recorded, but not which side of the bar is looked at: it is left out of the planes.',
    );
  }
  if (planes.length === 0) {
    notes.push('Every plane carries the same normal stress and no shear: there is no preferred plane to compare with.');
  }
  return notes;
}

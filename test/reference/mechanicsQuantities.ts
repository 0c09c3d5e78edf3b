import { type CriterionName, criteriaPredictions, frictionAngleDeg } from '../../src/mechanics/criteria.ts';
import { elasticPlasticState, elasticPlasticTwistDeg, permanentTwistDeg } from '../../src/mechanics/plasticity.ts';
import { rectangleCoefficients } from '../../src/mechanics/sections/rectangle.ts';
import { bredt } from '../../src/mechanics/sections/rectangularTube.ts';
import { sectionProperties } from '../../src/mechanics/sections/registry.ts';
import { stressConcentrationFactor } from '../../src/mechanics/stressConcentration.ts';
import { donnellShearStressMPa, longTubeShearStressMPa, tubeBuckling } from '../../src/mechanics/tubeBuckling.ts';
import type { ReferenceInputs } from './inputs.ts';
import { geometryOf, stateOf } from './quantities.ts';

const stateWhenYielding = (i: ReferenceInputs) => elasticPlasticState(geometryOf(i), i.torque('T'), i.stress('tauy'));

const tubeOf = (i: ReferenceInputs) => {
  const wallMm = i.length('t');
  const meanDiameterMm = 2 * i.length('r');
  return {
    diameterMm: meanDiameterMm + wallMm,
    boreMm: meanDiameterMm - wallMm,
    freeLengthMm: i.length('l'),
    youngsModulusMPa: i.stress('E'),
    poissonsRatio: i.number('nu'),
  };
};

const criterionOf = (i: ReferenceInputs, name: CriterionName) => {
  const strength = (key: string) => (i.has(key) ? i.stress(key) : null);
  const found = criteriaPredictions(stateOf(i), {
    tensileStrengthMPa: strength('St'),
    shearStrengthMPa: strength('Ss'),
    compressiveStrengthMPa: strength('Sc'),
    yieldStrengthMPa: strength('Sy'),
    frictionAngleDeg: i.has('phi') ? i.angle('phi') : null,
  }).find((prediction) => prediction.criterion === name);
  if (!found) throw new Error(`no criterion ${name}`);
  return found;
};

/** Torsional strength by a criterion: the shear stress at which its utilisation reaches 1. */
const torsionalStrength = (i: ReferenceInputs, name: CriterionName): number => {
  const { utilisation } = criterionOf(i, name);
  if (!utilisation) throw new Error(`${name} has no utilisation in this row`);
  return stateOf(i).tauMPa / utilisation;
};

const planeOf = (i: ReferenceInputs, which: 'nearer 0' | 'nearer 90'): number => {
  const planes = [...criterionOf(i, 'mohr-coulomb').planeAnglesDeg].sort((a, b) => Math.abs(a) - Math.abs(b));
  const plane = which === 'nearer 0' ? planes[0] : planes[1];
  if (plane === undefined) throw new Error('no plane in this row');
  return plane;
};

const factorOf = (i: ReferenceInputs, kind: 'shoulder-fillet' | 'circumferential-groove'): number =>
  stressConcentrationFactor({ kind, largerDiameterMm: i.length('D'), radiusMm: i.length('r') }, i.length('d')).factor;

/** Quantities of plasticity, criteria, buckling and stress concentration. */
export const MECHANICS_QUANTITIES: Readonly<Record<string, (inputs: ReferenceInputs) => number>> = {
  'rectangle alpha': (i) => rectangleCoefficients(i.number('q')).alpha,
  'rectangle beta': (i) => rectangleCoefficients(i.number('q')).beta,
  'rectangle short side share': (i) => rectangleCoefficients(i.number('q')).shortSideShare,
  'torsion constant': (i) => sectionProperties(geometryOf(i)).torsionConstantMm4,
  'torsion section modulus': (i) => sectionProperties(geometryOf(i)).torsionSectionModulusMm3,
  'plastic torsion modulus': (i) => sectionProperties(geometryOf(i)).plasticTorsionModulusMm3,
  'bending section modulus': (i) => sectionProperties(geometryOf(i)).bendingSectionModulusMm3,
  'torsion constant by area and width squared': (i) =>
    sectionProperties(geometryOf(i)).torsionConstantMm4 /
    (sectionProperties(geometryOf(i)).areaMm2 * i.length('flats') ** 2),
  'torsion modulus by area and width': (i) =>
    sectionProperties(geometryOf(i)).torsionSectionModulusMm3 /
    (sectionProperties(geometryOf(i)).areaMm2 * i.length('flats')),
  'Bredt shear stress': (i) => {
    const tube = { enclosedAreaMm2: i.number('Am_mm2'), medianLengthMm: 1, wallMm: i.length('t') };
    return (i.torque('T') * 1000) / bredt(tube).torsionSectionModulusMm3;
  },
  'yield torque': (i) => stateWhenYielding(i).yieldTorqueNm,
  'torque at full yielding': (i) => stateWhenYielding(i).fullyPlasticTorqueNm,
  'elastic core radius': (i) => {
    const radius = stateWhenYielding(i).elasticCoreRadiusMm;
    if (radius === null) throw new Error('no elastic core in this row');
    return radius;
  },
  'residual surface shear stress': (i) => stateWhenYielding(i).residualSurfaceShearStressMPa ?? Number.NaN,
  'elastic-plastic twist': (i) =>
    elasticPlasticTwistDeg(geometryOf(i), i.torque('T'), i.stress('tauy'), i.length('L'), i.stress('G')) ?? Number.NaN,
  'permanent twist': (i) =>
    permanentTwistDeg(geometryOf(i), i.torque('T'), i.stress('tauy'), i.length('L'), i.stress('G')) ?? Number.NaN,
  'curvature parameter': (i) => tubeBuckling(tubeOf(i)).curvatureParameter,
  'buckling shear stress': (i) => tubeBuckling(tubeOf(i)).criticalShearStressMPa,
  'buckling shear stress without knock-down': (i) => tubeBuckling(tubeOf(i)).theoreticalShearStressMPa,
  'Donnell hinged': (i) => donnellShearStressMPa(tubeOf(i), 'hinged'),
  'Donnell clamped': (i) => donnellShearStressMPa(tubeOf(i), 'clamped'),
  'long tube buckling': (i) => longTubeShearStressMPa(i.stress('E'), i.number('nu'), i.number('slenderness')),
  'Mohr-Coulomb plane nearer 0': (i) => planeOf(i, 'nearer 0'),
  'Mohr-Coulomb plane nearer 90': (i) => planeOf(i, 'nearer 90'),
  'friction angle': (i) =>
    frictionAngleDeg({ tensileStrengthMPa: i.stress('St'), compressiveStrengthMPa: i.stress('Sc') }) ?? Number.NaN,
  'torsional strength, Rankine': (i) => torsionalStrength(i, 'largest-normal-stress'),
  'torsional strength, Tresca': (i) => torsionalStrength(i, 'largest-shear-stress'),
  'torsional strength, von Mises': (i) => torsionalStrength(i, 'von-mises'),
  'torsional strength, Mohr-Coulomb': (i) => torsionalStrength(i, 'mohr-coulomb'),
  'torsional strength, modified Mohr': (i) => torsionalStrength(i, 'modified-mohr'),
  'stress concentration, shoulder fillet': (i) => factorOf(i, 'shoulder-fillet'),
  'stress concentration, groove': (i) => factorOf(i, 'circumferential-groove'),
};

import { normalStressMPa, principalStresses, shearStressMPa } from '../../src/mechanics/planes.ts';
import { sectionProperties } from '../../src/mechanics/sections/registry.ts';
import type { SurfaceStress } from '../../src/mechanics/stressState.ts';
import { surfaceStressOf } from '../../src/mechanics/surfaceStress.ts';
import {
  elasticShearStressMPa,
  elasticTwistDeg,
  fullyPlasticShearStressMPa,
  surfaceShearStrain,
} from '../../src/mechanics/torsion.ts';
import type { SectionGeometry } from '../../src/records/geometry.ts';
import type { ReferenceInputs } from './inputs.ts';

/** Geometry of a row: `section` with its dimensions, or `D` outside diameter and `bore`. */
export function geometryOf(inputs: ReferenceInputs): SectionGeometry {
  const mm = (name: string) => inputs.length(name);
  switch (inputs.has('section') ? inputs.text('section') : 'round') {
    case 'rectangle':
      return { section: 'rectangle', widthMm: mm('a'), heightMm: mm('b') };
    case 'square':
      return { section: 'square', sideMm: mm('s') };
    case 'ellipse':
      return { section: 'ellipse', majorAxisMm: mm('major'), minorAxisMm: mm('minor') };
    case 'triangle':
      return { section: 'equilateral-triangle', sideMm: mm('s') };
    case 'hexagon':
      return { section: 'hexagon', acrossFlatsMm: mm('flats') };
    case 'rectangular tube':
      return { section: 'rectangular-tube', widthMm: mm('a'), heightMm: mm('b'), wallMm: mm('t') };
    default: {
      const diameterMm = mm('D');
      return inputs.has('bore')
        ? { section: 'hollow-round', diameterMm, boreMm: mm('bore') }
        : { section: 'solid-round', diameterMm };
    }
  }
}

/** Stress state of a row: given directly, or from torque and axial force on a round bar. */
export function stateOf(inputs: ReferenceInputs): SurfaceStress {
  if (inputs.has('sx') || inputs.has('txs')) {
    const of = (name: string) => (inputs.has(name) ? inputs.stress(name) : 0);
    return { sigmaXMPa: of('sx'), sigmaYMPa: of('ss'), tauMPa: of('txs') };
  }
  const stress = surfaceStressOf({
    geometry: geometryOf(inputs),
    torqueMaxNm: inputs.torque('T'),
    torqueDirection: 'ccw',
    axialForceN: inputs.has('N') ? inputs.force('N') : 0,
  });
  if (!stress) throw new Error('no stress state in this row');
  return stress;
}

/** What the rows of the reference tables ask for; each answers in the inside unit. */
export const QUANTITIES: Readonly<Record<string, (inputs: ReferenceInputs) => number>> = {
  area: (i) => sectionProperties(geometryOf(i)).areaMm2,
  'polar second moment': (i) => sectionProperties(geometryOf(i)).torsionConstantMm4,
  'elastic shear stress': (i) => elasticShearStressMPa(geometryOf(i), i.torque('T')),
  'fully plastic shear stress': (i) => fullyPlasticShearStressMPa(geometryOf(i), i.torque('T')),
  'torque for elastic shear stress': (i) =>
    (i.stress('tau') * sectionProperties(geometryOf(i)).torsionSectionModulusMm3) / 1000,
  'fully plastic torque': (i) => (i.stress('tau') * sectionProperties(geometryOf(i)).plasticTorsionModulusMm3) / 1000,
  'plastic to yield torque': (i) => {
    const section = sectionProperties(geometryOf(i));
    return section.plasticTorsionModulusMm3 / section.torsionSectionModulusMm3;
  },
  'surface shear strain': (i) => surfaceShearStrain(geometryOf(i), i.angle('phi'), i.length('L')),
  'elastic twist': (i) => elasticTwistDeg(geometryOf(i), i.torque('T'), i.length('L'), i.stress('G')),
  'normal stress': (i) => normalStressMPa(stateOf(i), i.angle('theta')),
  'shear stress on plane': (i) => shearStressMPa(stateOf(i), i.angle('theta')),
  'sigma x': (i) => stateOf(i).sigmaXMPa,
  tau: (i) => stateOf(i).tauMPa,
  'sigma 1': (i) => principalStresses(stateOf(i)).sigma1MPa,
  'sigma 2': (i) => principalStresses(stateOf(i)).sigma2MPa,
  'largest shear': (i) => principalStresses(stateOf(i)).maxShearMPa,
  'tension plane': (i) => {
    const angle = principalStresses(stateOf(i)).tensionPlaneAngleDeg;
    if (angle === null) throw new Error('isotropic state has no tension plane');
    return angle;
  },
};

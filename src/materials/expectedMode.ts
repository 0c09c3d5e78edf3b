import normal from '@stdlib/stats-base-dists-normal';
import { MATERIAL_CLASSES, type MaterialClass, type MaterialClassId } from './classes.ts';
import type { MaterialProperties, PlaneModeName } from './materialProperties.ts';

/** Known to about this when the laboratory does not say; common practice for certificates and handbooks. */
export const DEFAULT_RELATIVE_STRENGTH_UNCERTAINTY = 0.05;
/** An expectation is stated from this probability on; below, the material leaves it undecided. */
export const STATED_FROM = 0.95;
/** Standard deviations from the middle to each end of a published range, taken as its middle 95 %. */
const RANGE_TO_DEVIATION = 2 * 1.959964;

/** How the material is expected to break under the loads. */
export interface ExpectedMode {
  /** Null: the material leaves it undecided. */
  readonly mode: PlaneModeName | null;
  /** Probability of a shear break from the ratio of the strengths; 0 or 1 where the mode is stated, not computed. */
  readonly shearProbability: number;
  /** Shear strength over tensile strength, and its standard uncertainty; null where the mode is stated. */
  readonly shearToTensile: number | null;
  readonly shearToTensileUncertainty: number | null;
  /** Where it comes from: the laboratory's statement, its strengths, or the class of material. */
  readonly basis: 'stated' | 'strengths' | 'class';
  readonly materialClass: MaterialClassId | null;
  /** Other modes that are known to happen and contradict nothing. */
  readonly alsoKnown: readonly PlaneModeName[];
  readonly sentence: string;
  readonly source: string;
}

/** Largest shear and largest normal stress of the state; only their ratio counts. */
export interface GoverningStresses {
  readonly sigma1MPa: number;
  readonly maxShearMPa: number;
}

const PURE_TORSION: GoverningStresses = { sigma1MPa: 1, maxShearMPa: 1 };

/**
 * The mode the material is expected to break in. Shear comes first when τ_max/S_s > σ1/S_t, that is when S_s/S_t is
 * below τ_max/σ1 (1 in pure torsion). S_s/S_t is taken as log-normal: from the laboratory's strengths with their
 * uncertainty, else from the published range of the class. @returns null when nothing is known of the material
 */
export function expectedMode(
  material: MaterialProperties | null | undefined,
  recognised: MaterialClassId | null = null,
  stresses: GoverningStresses = PURE_TORSION,
): ExpectedMode | null {
  const id = material?.materialClass ?? recognised;
  const materialClass = id === null ? null : MATERIAL_CLASSES[id];
  if (material?.expectedMode) return stated(material.expectedMode, id);
  const { tensileStrengthMPa: tensile, shearStrengthMPa: across, longitudinalShearStrengthMPa: along } = material ?? {};
  const shear = across && along ? Math.min(across, along) : (across ?? along);
  if (tensile && shear) {
    const relative = material?.relativeStrengthUncertainty ?? DEFAULT_RELATIVE_STRENGTH_UNCERTAINTY;
    const plane = along && shear === along ? 'shear-longitudinal' : (materialClass?.shearPlane ?? 'shear-transverse');
    const ratio = { middle: shear / tensile, logDeviation: Math.SQRT2 * relative };
    const source = `strengths of the laboratory: ${shear} MPa in shear, ${tensile} MPa in tension`;
    return fromRatio(ratio, plane, { basis: 'strengths', id, materialClass, stresses, source });
  }
  if (!materialClass) return null;
  if (materialClass.statedMode !== null) return ofClass(materialClass, materialClass.statedMode, id);
  if (!materialClass.shearToTensile) return null;
  const { from, to } = materialClass.shearToTensile;
  const ratio = { middle: Math.sqrt(from * to), logDeviation: Math.log(to / from) / RANGE_TO_DEVIATION };
  const { source } = materialClass;
  return fromRatio(ratio, materialClass.shearPlane, { basis: 'class', id, materialClass, stresses, source });
}

const MODE_WORDS: Readonly<Record<PlaneModeName, string>> = {
  'shear-transverse': 'by shear, square to the axis',
  'shear-longitudinal': 'by shear, along the axis',
  'normal-stress': 'by tension, on the tension plane',
};

function stated(mode: PlaneModeName, id: MaterialClassId | null): ExpectedMode {
  return {
    mode,
    shearProbability: mode === 'normal-stress' ? 0 : 1,
    shearToTensile: null,
    shearToTensileUncertainty: null,
    basis: 'stated',
    materialClass: id,
    alsoKnown: [],
    sentence: `The laboratory expects this material to break ${MODE_WORDS[mode]}.`,
    source: 'stated by the laboratory',
  };
}

function ofClass(materialClass: MaterialClass, mode: PlaneModeName, id: MaterialClassId | null): ExpectedMode {
  return {
    ...stated(mode, id),
    basis: 'class',
    sentence: `${capital(materialClass.title)} is expected to break ${MODE_WORDS[mode]}.`,
    source: materialClass.source,
  };
}

interface RatioContext {
  readonly basis: 'strengths' | 'class';
  readonly id: MaterialClassId | null;
  readonly materialClass: MaterialClass | null;
  readonly stresses: GoverningStresses;
  readonly source: string;
}

function fromRatio(
  { middle, logDeviation }: { readonly middle: number; readonly logDeviation: number },
  shearPlane: 'shear-transverse' | 'shear-longitudinal',
  { basis, id, materialClass, stresses, source }: RatioContext,
): ExpectedMode {
  const { sigma1MPa, maxShearMPa } = stresses;
  const shearProbability =
    sigma1MPa <= 0 ? 1 : normal.cdf((Math.log(maxShearMPa / sigma1MPa) - Math.log(middle)) / logDeviation, 0, 1);
  const mode =
    shearProbability >= STATED_FROM ? shearPlane : 1 - shearProbability >= STATED_FROM ? 'normal-stress' : null;
  const alsoKnown =
    mode === shearPlane && materialClass?.otherShearPlaneKnown
      ? [shearPlane === 'shear-transverse' ? ('shear-longitudinal' as const) : ('shear-transverse' as const)]
      : [];
  const who = materialClass ? capital(materialClass.title) : 'This material';
  const ratioText = `shear strength ${middle.toFixed(2)} of the tensile strength`;
  const sentence =
    mode === null
      ? `${who} (${ratioText}) leaves undecided whether shear or tension comes first.`
      : `${who} (${ratioText}) is expected to break ${MODE_WORDS[mode]}.`;
  return {
    mode,
    shearProbability,
    shearToTensile: middle,
    shearToTensileUncertainty: middle * logDeviation,
    basis,
    materialClass: id,
    alsoKnown,
    sentence,
    source,
  };
}

const capital = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1);

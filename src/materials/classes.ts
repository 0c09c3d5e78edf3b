import type { PlaneModeName } from './materialProperties.ts';

/** Kinds of material a torsion laboratory meets, coarse enough to be told by name. */
export const MATERIAL_CLASS_IDS = [
  'grey-iron',
  'nodular-iron',
  'malleable-iron',
  'wrought-steel',
  'wrought-aluminium',
  'copper-alloy',
  'magnesium-alloy',
  'wood',
  'concrete',
  'chalk',
  'ceramic',
  'cortical-bone',
] as const;
export type MaterialClassId = (typeof MATERIAL_CLASS_IDS)[number];

export interface MaterialClass {
  readonly title: string;
  /**
   * Published range of shear (or torsional) strength over tensile strength, taken as the middle 95 %. For wood: of
   * the shear strength along the grain over the tensile strength along the grain, far below 1.
   */
  readonly shearToTensile: { readonly from: number; readonly to: number } | null;
  /** The plane a shear break follows: the longitudinal one where the stock has a grain. */
  readonly shearPlane: 'shear-transverse' | 'shear-longitudinal';
  /** True where shear breaks on the other shear plane are known too, in drawn or banded stock. */
  readonly otherShearPlaneKnown: boolean;
  /** How it breaks in torsion, stated without a ratio; null: the ratio decides. */
  readonly statedMode: PlaneModeName | null;
  /** Typical values for the buckling of tubes; null where they scatter too much. */
  readonly youngsModulusMPa: number | null;
  readonly poissonsRatio: number | null;
  /** A break in torsion without much twist is the rule. */
  readonly brittle: boolean;
  readonly source: string;
}

const IRON = { shearPlane: 'shear-transverse', otherShearPlaneKnown: false, statedMode: null } as const;
const METAL = { ...IRON, otherShearPlaneKnown: true, brittle: false } as const;
const BRITTLE = { ...IRON, statedMode: 'normal-stress', shearToTensile: null, brittle: true } as const;

/** Published ranges; "memory" marks what was recalled and not looked up. */
export const MATERIAL_CLASSES: Readonly<Record<MaterialClassId, MaterialClass>> = {
  'grey-iron': {
    ...IRON,
    title: 'grey cast iron',
    shearToTensile: { from: 1.0, to: 1.6 },
    brittle: true,
    youngsModulusMPa: 110_000,
    poissonsRatio: 0.26,
    source:
      'torsional over tensile strength 1.18 to 1.42, ASTM classes 20 to 60 (Shigley, Table A-24; memory); 1.0 to 1.6 in a ' +
      'handbook table of ferrous strengths',
  },
  'nodular-iron': {
    ...IRON,
    title: 'nodular cast iron',
    shearToTensile: { from: 0.8, to: 1.05 },
    brittle: false,
    youngsModulusMPa: 169_000,
    poissonsRatio: 0.275,
    source: 'torsional strength about 0.9 of the tensile strength, iron-casting handbooks (memory)',
  },
  'malleable-iron': {
    ...IRON,
    title: 'malleable cast iron',
    shearToTensile: { from: 0.85, to: 1.1 },
    brittle: false,
    youngsModulusMPa: 165_000,
    poissonsRatio: 0.27,
    source: 'ASTM A47: 48 ksi shear, 50 ksi tension, Beer & Johnston, Mechanics of Materials, appendix B',
  },
  'wrought-steel': {
    ...METAL,
    title: 'wrought steel',
    shearToTensile: { from: 0.6, to: 0.82 },
    youngsModulusMPa: 205_000,
    poissonsRatio: 0.29,
    source:
      '0.75 for all steels, 0.75 to 0.80 quoted, handbook table of ferrous strengths; lower end by von Mises, 0.577',
  },
  'wrought-aluminium': {
    ...METAL,
    title: 'wrought aluminium alloy',
    shearToTensile: { from: 0.55, to: 0.68 },
    youngsModulusMPa: 70_000,
    poissonsRatio: 0.33,
    source: '0.57 to 0.64: 2014-T6, 2024-T4, 5456, 6061-T6, 7075-T6, Beer & Johnston, appendix B',
  },
  'copper-alloy': {
    ...METAL,
    title: 'copper or copper alloy',
    shearToTensile: { from: 0.5, to: 0.8 },
    youngsModulusMPa: 115_000,
    poissonsRatio: 0.34,
    source: '0.51 to 0.80: copper, yellow brass, red brass, annealed and cold worked, Beer & Johnston, appendix B',
  },
  'magnesium-alloy': {
    ...METAL,
    title: 'magnesium alloy',
    shearToTensile: { from: 0.42, to: 0.6 },
    youngsModulusMPa: 45_000,
    poissonsRatio: 0.35,
    source: '0.46 and 0.51: AZ80, AZ31, Beer & Johnston, appendix B (memory)',
  },
  wood: {
    title: 'wood, grain along the axis',
    shearToTensile: null,
    shearPlane: 'shear-longitudinal',
    otherShearPlaneKnown: false,
    statedMode: 'shear-longitudinal',
    brittle: true,
    youngsModulusMPa: null,
    poissonsRatio: null,
    source:
      'shear along the grain 6 to 14 MPa at 12 % moisture, USDA Wood Handbook FPL-GTR-190 (2010), Table 5-3a; twisted ' +
      'cylinders of spruce and fir failed in the longitudinal plane (Koran, Wood and Fiber Science)',
  },
  concrete: {
    ...BRITTLE,
    title: 'concrete or mortar',
    youngsModulusMPa: null,
    poissonsRatio: null,
    source: 'helical tensile failure of unnotched cylinders, Nogueira, ACI Materials Journal 115-6 (2018) 909–923',
  },
  chalk: {
    ...BRITTLE,
    title: 'chalk or plaster',
    youngsModulusMPa: null,
    poissonsRatio: null,
    source: '45° helix, the textbook case of a brittle bar in torsion: any mechanics of materials text',
  },
  ceramic: {
    ...BRITTLE,
    title: 'ceramic or glass',
    youngsModulusMPa: null,
    poissonsRatio: null,
    source: 'largest normal stress governs brittle solids: Dowling, Mechanical Behavior of Materials',
  },
  'cortical-bone': {
    ...BRITTLE,
    title: 'cortical bone',
    youngsModulusMPa: null,
    poissonsRatio: null,
    source:
      'spiral fracture of 11 of 11 tibiae in torsion, J. Eng. Med. (Proc. IMechE H) 2012, 10.1177/0954411912452996',
  },
};

import { z } from 'zod';
import { MATERIAL_CLASS_IDS } from './classes.ts';

/** The failure modes a plane speaks for. */
export const PLANE_MODE_NAMES = ['shear-transverse', 'shear-longitudinal', 'normal-stress'] as const;
export type PlaneModeName = (typeof PLANE_MODE_NAMES)[number];

const strengthMPa = (what: string) =>
  z.number().positive().max(100_000).nullable().optional().describe(`${what}, MPa, > 0`);

/** What a laboratory knows of a material; everything may be unknown. */
export const MaterialProperties = z.object({
  materialClass: z.enum(MATERIAL_CLASS_IDS).nullable().optional(),
  tensileStrengthMPa: strengthMPa('tensile strength'),
  shearStrengthMPa: strengthMPa('shear (torsional) strength, on planes across the axis where it has a grain'),
  longitudinalShearStrengthMPa: strengthMPa('shear strength on planes along the axis, where it differs'),
  compressiveStrengthMPa: strengthMPa('compressive strength, magnitude'),
  yieldStrengthMPa: strengthMPa('tensile yield or proof strength'),
  shearYieldStrengthMPa: strengthMPa('shear yield strength; yield strength/√3 when not given'),
  relativeStrengthUncertainty: z
    .number()
    .positive()
    .max(0.5)
    .nullable()
    .optional()
    .describe('relative standard uncertainty of each strength; 0.05 when not given'),
  frictionAngleDeg: z.number().min(0).lt(90).nullable().optional(),
  youngsModulusMPa: z.number().positive().max(1_500_000).nullable().optional().describe("Young's modulus, MPa, > 0"),
  poissonsRatio: z.number().min(0).lt(0.5).nullable().optional(),
  expectedMode: z.enum(PLANE_MODE_NAMES).nullable().optional().describe("the laboratory's own expectation"),
  scatterDeg: z
    .number()
    .min(0)
    .max(45)
    .nullable()
    .optional()
    .describe('standard deviation of the plane angle from specimen to specimen, degrees'),
});
export type MaterialProperties = z.infer<typeof MaterialProperties>;

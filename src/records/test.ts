import { z } from 'zod';
import { SectionGeometry } from './geometry.ts';

export const TorqueDirection = z.enum(['ccw', 'cw']);
export type TorqueDirection = z.infer<typeof TorqueDirection>;

/** Where the specimen broke; only inside the gauge length does the break speak of the nominal stress. */
export const BreakLocation = z.enum(['gauge-length', 'outside-gauge-length', 'shoulder', 'notch', 'grip']);
export type BreakLocation = z.infer<typeof BreakLocation>;

/** How the torque came on: once to failure, to and fro, or many times. */
export const TorsionHistory = z.enum(['monotonic', 'reversed', 'cyclic']);
export type TorsionHistory = z.infer<typeof TorsionHistory>;

const optionalText = (max: number) => z.string().trim().max(max).nullable().default(null);

/** What a laboratory enters for one specimen twisted to failure. */
export const TestInput = z.object({
  specimenId: z.string().trim().min(1).max(200).describe("the laboratory's own identification of the specimen"),
  testDate: z.iso.date().nullable().default(null).describe('day of the test, YYYY-MM-DD'),
  material: optionalText(200),
  heat: optionalText(200).describe('heat, melt or batch'),
  geometry: SectionGeometry,
  gaugeLengthMm: z.number().positive().max(100_000).nullable().default(null),
  torqueMaxNm: z
    .number()
    .positive()
    .max(10_000_000)
    .nullable()
    .default(null)
    .describe('largest torque recorded, N·m, magnitude; null when no torque is known'),
  torqueDirection: TorqueDirection.nullable().default(null).describe('as seen facing the driven end'),
  twistFractureDeg: z.number().nonnegative().max(36_000_000).nullable().default(null),
  axialForceN: z.number().min(-1e9).max(1e9).nullable().default(null).describe('tension positive'),
  bendingMomentNm: z.number().min(-1e7).max(1e7).nullable().default(null),
  bendingAzimuthDeg: z
    .number()
    .min(-360)
    .max(360)
    .nullable()
    .optional()
    .describe('angle around the axis from the fibre the bending moment stretches most to the place looked at, degrees'),
  internalPressureMPa: z
    .number()
    .min(0)
    .max(10_000)
    .nullable()
    .optional()
    .describe('pressure inside a round tube with closed ends, MPa'),
  breakLocation: BreakLocation.nullable().optional().describe('where the specimen broke'),
  torsionHistory: TorsionHistory.nullable().optional().describe('how the torque came on'),
  operator: optionalText(200),
  remarks: optionalText(20_000),
});
export type TestInput = z.infer<typeof TestInput>;

/** A stored test. `version` counts changes, from 1; the store keeps every earlier version. */
export const Test = TestInput.extend({
  id: z.string(),
  version: z.number().int().positive(),
  createdAt: z.string(),
  updatedAt: z.string(),
});
export type Test = z.infer<typeof Test>;

import { z } from 'zod';
import { SectionGeometry } from './geometry.ts';

export const TorqueDirection = z.enum(['ccw', 'cw']);
export type TorqueDirection = z.infer<typeof TorqueDirection>;

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

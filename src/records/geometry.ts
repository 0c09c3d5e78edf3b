import { z } from 'zod';

/** Largest outside dimension a torsion laboratory could mean, mm. Above it the unit is almost surely wrong. */
export const LARGEST_DIMENSION_MM = 1000;

const lengthMm = (what: string) =>
  z.number().positive().max(LARGEST_DIMENSION_MM).describe(`${what}, mm, > 0 and ≤ ${LARGEST_DIMENSION_MM}`);

/** Solid round bar, wire or dowel. */
export const SolidRound = z.object({
  section: z.literal('solid-round'),
  diameterMm: lengthMm('outside diameter of the gauge section'),
});

/** Tube: round with a concentric round bore. */
export const HollowRound = z
  .object({
    section: z.literal('hollow-round'),
    diameterMm: lengthMm('outside diameter of the gauge section'),
    boreMm: lengthMm('bore diameter, smaller than the outside diameter'),
  })
  .refine((g) => g.boreMm < g.diameterMm, {
    path: ['boreMm'],
    error: 'boreMm must be smaller than diameterMm',
  });

/** Cross-section of a specimen, with its dimensions. One member a section; further sections are added here. */
export const SectionGeometry = z.union([SolidRound, HollowRound]);
export type SectionGeometry = z.infer<typeof SectionGeometry>;

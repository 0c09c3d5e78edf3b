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

/** Rectangular bar; the order of the two sides does not matter. */
export const Rectangle = z.object({
  section: z.literal('rectangle'),
  widthMm: lengthMm('one side of the section'),
  heightMm: lengthMm('the other side of the section'),
});

export const Square = z.object({ section: z.literal('square'), sideMm: lengthMm('side of the section') });

/** Elliptical bar; full axes, in any order. */
export const Ellipse = z.object({
  section: z.literal('ellipse'),
  majorAxisMm: lengthMm('longer axis of the section, end to end'),
  minorAxisMm: lengthMm('shorter axis of the section, end to end'),
});

export const EquilateralTriangle = z.object({
  section: z.literal('equilateral-triangle'),
  sideMm: lengthMm('side of the section'),
});

export const Hexagon = z.object({
  section: z.literal('hexagon'),
  acrossFlatsMm: lengthMm('distance across the flats of a regular hexagon'),
});

/** Tube of rectangular outline and uniform thin wall. */
export const RectangularTube = z
  .object({
    section: z.literal('rectangular-tube'),
    widthMm: lengthMm('one outside width'),
    heightMm: lengthMm('the other outside width'),
    wallMm: lengthMm('wall thickness, at most a tenth of the shorter width'),
  })
  .refine((g) => g.wallMm <= 0.1 * Math.min(g.widthMm, g.heightMm) * (1 + 1e-12), {
    path: ['wallMm'],
    error: 'wallMm must be at most a tenth of the shorter width: the thin-wall formula holds no further',
  });

/** Cross-section of a specimen, with its dimensions. One member a section; further sections are added here. */
export const SectionGeometry = z.union([
  SolidRound,
  HollowRound,
  Rectangle,
  Square,
  Ellipse,
  EquilateralTriangle,
  Hexagon,
  RectangularTube,
]);
export type SectionGeometry = z.infer<typeof SectionGeometry>;

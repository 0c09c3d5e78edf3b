import { z } from 'zod';

/** A point of the upright photo (EXIF orientation applied), full resolution; [x, y] px, y grows down. */
export const PointPx = z.tuple([z.number(), z.number()]);
export type PointPx = z.infer<typeof PointPx>;

export const FractureShape = z.enum(['helix', 'plane', 'longitudinal', 'mixed']);
export type FractureShape = z.infer<typeof FractureShape>;

export const HandSchema = z.enum(['left', 'right', 'none']);

export const TraceSegment = z.object({
  planeAngleDeg: z.number().describe('plane angle of the segment, degrees, (−90, 90]'),
  share: z.number().min(0).max(1).describe('share of the visible trace length, 0 to 1'),
  expandedUncertaintyDeg: z.number().nonnegative().optional(),
  closingStep: z.boolean().optional().describe('true for the longitudinal step that closes a helix'),
});
export type TraceSegment = z.infer<typeof TraceSegment>;

export const Warning = z.object({ code: z.string(), message: z.string() });
export type Warning = z.infer<typeof Warning>;

/** One line of the uncertainty budget: standard uncertainty the component adds to the plane angle. */
export const BudgetLine = z.object({
  component: z.string(),
  standardUncertaintyDeg: z.number().nonnegative(),
  /** How it was found: statistics of this photo (A) or other knowledge (B), GUM 4.2 and 4.3. */
  evaluation: z.enum(['A', 'B']),
  explanation: z.string(),
});
export type BudgetLine = z.infer<typeof BudgetLine>;

/** What a plane angle is, wherever it came from. */
const measuredFields = {
  planeAngleDeg: z.number().describe('slope of the trace at the middle of the visible face, degrees, (−90, 90]'),
  expandedUncertaintyDeg: z.number().nonnegative(),
  coverageFactor: z.number().positive(),
  hand: HandSchema,
  shape: FractureShape,
  planeTiltDeg: z.number().nullable().describe('tilt β of a flat break, 0 to 90 degrees; null for other shapes'),
  planeTiltExpandedUncertaintyDeg: z.number().nonnegative().nullable().optional(),
  segments: z.array(TraceSegment),
};

/** What the measurement of one photo returns; the JSON line of `breakplane measure` is this plus `file`. */
export const PhotoMeasured = z.object({
  outcome: z.literal('measured'),
  ...measuredFields,
  axisPx: z.tuple([PointPx, PointPx]),
  diameterPx: z.number().positive(),
  tracePx: z.array(PointPx),
  /** The two specimen edges, for the overlay. */
  edgesPx: z.array(z.tuple([PointPx, PointPx])).optional(),
  view: z.enum(['pair', 'half']).optional(),
  budget: z.array(BudgetLine).optional(),
  quality: z.record(z.string(), z.number()).optional(),
  widthPx: z.number().int(),
  heightPx: z.number().int(),
  sha256: z.string(),
  elapsedMs: z.number(),
  warnings: z.array(Warning),
});
export type PhotoMeasured = z.infer<typeof PhotoMeasured>;

/** `reason.code` is one of the stable codes; it is a laboratory result and is recorded. */
export const NOT_MEASURED_CODES = [
  'no-specimen',
  'no-fracture',
  'fracture-cut-off',
  'too-blurred',
  'too-small',
  'too-dark',
  'over-exposed',
  'ambiguous',
  'not-a-photo',
  'too-many-pixels',
  'fault',
] as const;
export const PhotoNotMeasured = z.object({
  outcome: z.literal('not-measured'),
  reason: z.object({ code: z.enum(NOT_MEASURED_CODES), message: z.string() }),
  axisPx: z.tuple([PointPx, PointPx]).optional(),
  diameterPx: z.number().positive().optional(),
  quality: z.record(z.string(), z.number()).optional(),
  widthPx: z.number().int().optional(),
  heightPx: z.number().int().optional(),
  sha256: z.string(),
  elapsedMs: z.number(),
  warnings: z.array(Warning),
});
export type PhotoNotMeasured = z.infer<typeof PhotoNotMeasured>;

export const PhotoMeasurement = z.discriminatedUnion('outcome', [PhotoMeasured, PhotoNotMeasured]);
export type PhotoMeasurement = z.infer<typeof PhotoMeasurement>;

/** The part of any reading that the failure-mode rule looks at. */
export const PlaneReading = z.object({
  ...measuredFields,
  view: z.enum(['pair', 'half']).optional(),
});
export type PlaneReading = z.infer<typeof PlaneReading>;

export const ReadingMethod = z.enum(['photo-automatic', 'photo-hand', 'instrument']);
export type ReadingMethod = z.infer<typeof ReadingMethod>;

/** A stored reading. Never changed: a correction is a new reading kept beside the old one. */
export const Reading = z.object({
  id: z.string(),
  testId: z.string(),
  method: ReadingMethod,
  /** Engine that made it (`photo-automatic`, `photo-hand`), e.g. "photo-1"; null for an instrument. */
  engineVersion: z.string().nullable(),
  photoSha256: z.string().nullable(),
  /** "vernier bevel protractor", for method `instrument`. */
  instrument: z.string().nullable(),
  operator: z.string().nullable(),
  remarks: z.string().nullable(),
  createdAt: z.string(),
  /** Set when a later reading or a person set it aside; a reading is never deleted. */
  setAside: z.boolean().default(false),
  result: z.discriminatedUnion('outcome', [
    PhotoMeasured,
    PhotoNotMeasured,
    z.object({ outcome: z.literal('by-instrument'), ...measuredFields }),
  ]),
});
export type Reading = z.infer<typeof Reading>;

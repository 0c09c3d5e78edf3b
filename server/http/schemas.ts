import { z } from 'zod';
import { CANONICAL_HEADERS } from '../../src/log/columnNames.ts';
import { SectionGeometry } from '../../src/records/geometry.ts';
import { FractureShape, PointPx, Reading, TraceSegment } from '../../src/records/reading.ts';
import { Test, TestInput, TorqueDirection } from '../../src/records/test.ts';

/** What the service takes and answers; the records themselves are those of src/records. */

const nullable = <Schema extends z.ZodType>(schema: Schema) => schema.nullable();

export const PhotoRecord = z
  .object({
    sha256: z.string(),
    testId: nullable(z.string()),
    fileName: z.string(),
    mediaType: z.string(),
    bytes: z.number().int(),
    widthPx: nullable(z.number().int()),
    heightPx: nullable(z.number().int()),
    addedAt: z.string(),
  })
  .meta({ id: 'Photo' });

const Stress = z.object({ sigmaXMPa: z.number(), sigmaYMPa: z.number(), tauMPa: z.number() });
const ShearStressValue = z.object({
  kind: z.enum(['elastic', 'fully-plastic']),
  shearStressMPa: z.number(),
  label: z.string(),
});
const Plane = z.object({
  plane: z.enum(['tension', 'compression', 'shear-transverse', 'shear-longitudinal']),
  planeAngleDeg: z.number(),
  normalStressMPa: z.number(),
  shearStressMPa: z.number(),
});
const Numbers = z.record(z.string(), z.number());

export const FailureModeName = z.enum([
  'shear-transverse',
  'shear-longitudinal',
  'normal-stress',
  'mixed',
  'indeterminate',
  'not-attributable',
]);

/** `Assessment` of src/verdict/model.ts as a schema, for the description of the service. */
export const AssessmentAnswer = z
  .object({
    stress: nullable(
      z.object({
        surface: Stress,
        elastic: ShearStressValue,
        fullyPlastic: ShearStressValue,
        quoted: ShearStressValue,
        sigma1MPa: z.number(),
        sigma2MPa: z.number(),
        maxShearMPa: z.number(),
      }),
    ),
    planesFor: Stress,
    planes: z.array(Plane),
    readingId: nullable(z.string()),
    statement: nullable(
      z.object({
        mode: FailureModeName,
        probability: z.number(),
        likeliestMode: z.string(),
        modeProbabilities: Numbers,
        comparedQuantity: z.enum(['planeAngle', 'planeTilt']),
        comparedDeg: z.number(),
        comparedExpandedUncertaintyDeg: z.number(),
        ruleText: z.string(),
        reason: nullable(z.object({ code: z.string(), message: z.string() })),
        evidence: z.array(
          z.object({
            code: z.string(),
            sign: z.enum(['supports', 'neutral', 'contradicts']),
            sentence: z.string(),
            numbers: Numbers,
          }),
        ),
      }),
    ),
    notes: z.array(z.string()),
  })
  .meta({ id: 'Assessment' });

const Flag = z.object({ code: z.string(), sentence: z.string() });

export const TestRowAnswer = Test.extend({
  mode: nullable(FailureModeName),
  probability: nullable(z.number()),
  planeAngleDeg: nullable(z.number()),
  expandedUncertaintyDeg: nullable(z.number()),
  photoCount: z.number().int(),
  readingCount: z.number().int(),
  reviewed: z.boolean().describe('somebody has looked at the test as it stands now'),
  flags: z.array(Flag),
}).meta({ id: 'TestRow' });

export const TestPageAnswer = z.object({
  tests: z.array(TestRowAnswer),
  nextCursor: nullable(z.string()),
  total: z.number().int(),
});

export const SheetWithoutTest = z.object({
  photos: z.array(PhotoRecord),
  readings: z.array(Reading),
  assessment: AssessmentAnswer,
});
export const SheetAnswer = SheetWithoutTest.extend({ test: Test });

export const ReadingAdded = z.object({ reading: Reading, assessment: AssessmentAnswer });

export const LaboratoryAnswer = z.object({
  tests: z.number().int(),
  demoAvailable: z.boolean(),
  engineVersion: z.string(),
  programVersion: z.string(),
});

const flagText = z.enum(['true', 'false']).transform((text) => text === 'true');

/** Who makes a change, and why: kept in the history of the record. */
export const Change = z.object({
  by: z.string().trim().max(200).optional(),
  why: z.string().trim().max(2000).optional(),
});

export const TestToCreate = TestInput.extend({ change: Change.optional() });
export const TestToChange = TestToCreate;

export const ListQueryText = z.object({
  limit: z.coerce.number().int().min(1).max(500).default(50),
  cursor: z.string().max(1000).optional(),
  text: z.string().max(500).optional(),
  material: z.string().max(200).optional(),
  heat: z.string().max(200).optional(),
  operator: z.string().max(200).optional(),
  section: z.string().max(50).optional(),
  mode: z.enum([...FailureModeName.options, 'none']).optional(),
  flagged: flagText.optional(),
  measured: flagText.optional(),
  reviewed: flagText.optional(),
  from: z.iso.date().optional(),
  to: z.iso.date().optional(),
  angleFromDeg: z.coerce.number().min(-90).max(90).optional(),
  angleToDeg: z.coerce.number().min(-90).max(90).optional(),
  sort: z.enum(['newest', 'oldest', 'changed']).optional(),
});

const person = { operator: z.string().trim().max(200).optional(), remarks: z.string().trim().max(20_000).optional() };
const angleDeg = z.number().min(-180).max(180);

export const InstrumentReading = z.object({
  method: z.literal('instrument'),
  planeAngleDeg: angleDeg.describe('plane angle, degrees; wrapped into (−90, 90]'),
  expandedUncertaintyDeg: z.number().positive().max(90).describe('U = k u, degrees'),
  coverageFactor: z.number().min(1).max(5).default(2),
  instrument: z.string().trim().min(1).max(200).describe('e.g. vernier bevel protractor'),
  shape: FractureShape.exclude(['mixed']).optional().describe('default: helix, longitudinal beyond 67.5°'),
  planeTiltDeg: z.number().min(0).max(90).optional().describe('tilt of a flat break, for shape plane'),
  ...person,
});

export const PhotoHandReading = z.object({
  method: z.literal('photo-hand'),
  photoSha256: z.string().regex(/^[0-9a-f]{64}$/),
  axisPx: z.tuple([PointPx, PointPx]),
  diameterPx: z.number().positive().max(100_000),
  tracePx: z.array(PointPx).min(2).max(5000),
  ...person,
});

export const ReadingToAdd = z.discriminatedUnion('method', [InstrumentReading, PhotoHandReading]);

export const Review = z.object({
  version: z.number().int().positive().describe('version of the test that was looked at'),
  by: z.string().trim().min(1).max(200).describe('who looked at it'),
  note: z.string().trim().max(2000).optional(),
});

export const SetAside = z.object({
  setAside: z.boolean(),
  why: z.string().trim().min(1).max(2000).describe('why, for the history'),
  by: z.string().trim().max(200).optional(),
});

export const ToClassify = z.object({
  geometry: SectionGeometry.nullable().optional(),
  torqueMaxNm: TestInput.shape.torqueMaxNm,
  torqueDirection: TorqueDirection.nullable().optional(),
  axialForceN: TestInput.shape.axialForceN,
  bendingMomentNm: TestInput.shape.bendingMomentNm,
  planeAngleDeg: angleDeg,
  expandedUncertaintyDeg: z.number().nonnegative().max(90),
  coverageFactor: z.number().min(1).max(5).default(2),
  shape: FractureShape.optional(),
  planeTiltDeg: z.number().min(0).max(90).nullable().optional(),
  segments: z.array(TraceSegment).max(100).optional(),
  rule: z
    .object({ minimumProbability: z.number().min(0.5).max(1), minimumSegmentShare: z.number().min(0).max(0.5) })
    .partial()
    .optional(),
});

export const ImportAnswer = z
  .object({
    id: z.string(),
    rows: z.number().int(),
    stored: z.number().int(),
    updated: z.number().int(),
    unchanged: z.number().int(),
    refused: z.number().int(),
    refusals: z.array(
      z.object({
        line: z.number().int(),
        column: nullable(z.string()),
        value: nullable(z.string()),
        code: z.string(),
        message: z.string(),
      }),
    ),
    photosQueued: z.number().int(),
    photosMeasured: z.number().int(),
  })
  .meta({ id: 'ImportSummary' });

/** Columns mapped by hand: header of the file → canonical column; null leaves the column out. */
export const ColumnMapping = z
  .array(
    z.object({
      header: z.string().max(500),
      column: nullable(z.enum(CANONICAL_HEADERS)),
      unit: z.string().max(50).optional().describe('unit of the cells that carry none'),
    }),
  )
  .max(500);

export const LogPreviewAnswer = z.object({
  name: z.string(),
  encoding: z.string(),
  delimiter: z.string(),
  decimalMark: z.enum(['point', 'comma', 'mixed']),
  headerLine: z.number().int(),
  headers: z.array(z.string()),
  columns: z.array(z.object({ header: z.string(), column: z.string(), unit: nullable(z.string()) })),
  /** Every column a log may have, to choose from. */
  knownColumns: z.array(z.string()),
  rows: z.array(z.array(z.string())).describe('the first rows, cell by cell'),
  remembered: z.boolean().describe('true when columns are mapped as the laboratory did before'),
  notes: z.array(z.string()),
});

export const MeasuringAnswer = z.object({
  waiting: z.number().int(),
  running: z.number().int(),
  done: z.number().int(),
  setAside: z.number().int(),
  cancelled: z.number().int(),
  paused: z.boolean(),
  photosPerMinute: nullable(z.number()),
  secondsLeft: nullable(z.number().int()),
});

export const HistoryAnswer = z.object({
  history: z.array(
    z.object({
      at: z.string(),
      by: nullable(z.string()),
      why: nullable(z.string()),
      what: z.enum([
        'created',
        'changed',
        'reading-added',
        'reading-set-aside',
        'reading-taken-back',
        'photo-added',
        'reviewed',
      ]),
      version: nullable(z.number().int()),
      changes: z.array(z.object({ field: z.string(), before: z.unknown(), after: z.unknown() })),
      readingId: nullable(z.string()),
      photoSha256: nullable(z.string()),
    }),
  ),
});

export const TestIdParam = z.object({ id: z.string().min(1).max(100) });
export const PhotoParam = z.object({ sha256: z.string().regex(/^[0-9a-f]{64}$/) });
export const TestPhotoParam = z.object({ ...TestIdParam.shape, ...PhotoParam.shape });

import type { SectionGeometry } from '../../src/records/geometry.ts';
import type { Quantity } from '../../src/units.ts';

/** The fields of the test form. Names are those of the stored record, so a refusal names its field. */
export const NUMBER_FIELDS = {
  diameterMm: { quantity: 'length' },
  boreMm: { quantity: 'length' },
  gaugeLengthMm: { quantity: 'length' },
  torqueMaxNm: { quantity: 'torque' },
  twistFractureDeg: { quantity: 'angle' },
  axialForceN: { quantity: 'force' },
  bendingMomentNm: { quantity: 'torque' },
} as const satisfies Readonly<Record<string, { readonly quantity: Quantity }>>;

export type NumberFieldName = keyof typeof NUMBER_FIELDS;

export const TEXT_FIELDS = ['specimenId', 'testDate', 'material', 'heat', 'operator', 'remarks'] as const;
export type TextFieldName = (typeof TEXT_FIELDS)[number];

export type FieldName = NumberFieldName | TextFieldName | 'section' | 'torqueDirection';

export type SectionName = SectionGeometry['section'];

/** The dimensions each section asks for, in the order they are asked. */
export const SECTION_DIMENSIONS = {
  'solid-round': ['diameterMm'],
  'hollow-round': ['diameterMm', 'boreMm'],
} as const satisfies Readonly<Record<SectionName, readonly NumberFieldName[]>>;

export const SECTION_NAMES = Object.keys(SECTION_DIMENSIONS) as readonly SectionName[];

/** Every dimension some section asks for; these live in `geometry` in the stored record. */
const DIMENSIONS: ReadonlySet<NumberFieldName> = new Set(Object.values(SECTION_DIMENSIONS).flat());

export const isDimension = (name: NumberFieldName): boolean => DIMENSIONS.has(name);

export const NUMBER_FIELD_NAMES = Object.keys(NUMBER_FIELDS) as readonly NumberFieldName[];

import { SectionGeometry } from '../../src/records/geometry.ts';
import type { Quantity } from '../../src/units.ts';

/** The fields of the test form. Names are those of the stored record, so a refusal names its field. */
export const NUMBER_FIELDS = {
  diameterMm: { quantity: 'length' },
  boreMm: { quantity: 'length' },
  widthMm: { quantity: 'length' },
  heightMm: { quantity: 'length' },
  sideMm: { quantity: 'length' },
  majorAxisMm: { quantity: 'length' },
  minorAxisMm: { quantity: 'length' },
  acrossFlatsMm: { quantity: 'length' },
  wallMm: { quantity: 'length' },
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
export const SECTION_DIMENSIONS: Readonly<Record<string, readonly NumberFieldName[]>> = {
  'solid-round': ['diameterMm'],
  'hollow-round': ['diameterMm', 'boreMm'],
  rectangle: ['widthMm', 'heightMm'],
  square: ['sideMm'],
  ellipse: ['majorAxisMm', 'minorAxisMm'],
  'equilateral-triangle': ['sideMm'],
  hexagon: ['acrossFlatsMm'],
  'rectangular-tube': ['widthMm', 'heightMm', 'wallMm'],
};

/** Sections the form offers: those the records know. */
export const SECTION_NAMES: readonly SectionName[] = SectionGeometry.options.map(
  (option) => option.shape.section.value,
);

/** Every dimension some section asks for; these live in `geometry` in the stored record. */
const DIMENSIONS: ReadonlySet<NumberFieldName> = new Set(Object.values(SECTION_DIMENSIONS).flat());

export const isDimension = (name: NumberFieldName): boolean => DIMENSIONS.has(name);

export const NUMBER_FIELD_NAMES = Object.keys(NUMBER_FIELDS) as readonly NumberFieldName[];

import type { NumberFieldName, SectionName, TextFieldName } from '../sheet/testFields.ts';

export const NUMBER_LABEL: Readonly<Record<NumberFieldName, string>> = {
  diameterMm: 'Outside diameter',
  boreMm: 'Bore',
  widthMm: 'Width',
  heightMm: 'Height',
  sideMm: 'Side',
  majorAxisMm: 'Longer axis',
  minorAxisMm: 'Shorter axis',
  acrossFlatsMm: 'Across flats',
  wallMm: 'Wall thickness',
  gaugeLengthMm: 'Gauge length',
  torqueMaxNm: 'Largest torque',
  twistFractureDeg: 'Twist at fracture',
  axialForceN: 'Axial force',
  bendingMomentNm: 'Bending moment',
};

export const NUMBER_HINT: Readonly<Partial<Record<NumberFieldName, string>>> = {
  torqueMaxNm: 'Magnitude; leave empty when no torque is known.',
  axialForceN: 'Tension positive.',
};

export const TEXT_LABEL: Readonly<Record<TextFieldName, string>> = {
  specimenId: 'Specimen',
  testDate: 'Test date',
  material: 'Material',
  heat: 'Heat',
  operator: 'Operator',
  remarks: 'Remarks',
};

export const SECTION_LABEL: Readonly<Record<string, string>> = {
  'solid-round': 'Solid round',
  'hollow-round': 'Tube, round',
  rectangle: 'Rectangle',
  square: 'Square',
  ellipse: 'Ellipse',
  'equilateral-triangle': 'Equilateral triangle',
  hexagon: 'Hexagon',
  'rectangular-tube': 'Tube, rectangular',
};

export const TEST_FORM = {
  title: 'Specimen and loads',
  section: 'Section',
  torqueDirection: 'Torque direction',
  torqueDirections: { '': 'Not known', ccw: 'Counter-clockwise', cw: 'Clockwise' },
  torqueDirectionHint: 'As you face the driven end.',
  unsaved: 'Not saved yet',
  saved: 'Saved',
  savingFailed: 'Not saved.',
  changedMeanwhile: 'Somebody else has saved this test since you opened it.',
  keepMine: 'Save mine over it',
  takeTheirs: 'Take the saved one',
  correctFirst: 'Correct the marked fields to save.',
  create: 'Create the test',
  undoChanges: 'Undo the changes',
} as const;

export const FIELD_MESSAGES = {
  needed: 'Fill in a number; the stresses need it.',
  tooLong: 'This text is too long.',
  limit: (sign: string, limit: string, came: string) => `must be ${sign} ${limit}, got ${came}`,
  bore: (diameter: string, came: string) => `must be smaller than the outside diameter ${diameter}, got ${came}`,
  text: {
    specimenId: 'Give the identification written on the specimen, 1 to 200 characters.',
    testDate: 'Give a day as YYYY-MM-DD.',
  } as Readonly<Partial<Record<string, string>>>,
} as const;

import { LabError } from '../../src/errors.ts';
import type { Test } from '../../src/records/test.ts';
import { parseQuantity } from '../../src/units.ts';
import { fieldText, type UnitSystem, unitShown } from '../units/unitSystem.ts';
import {
  isDimension,
  NUMBER_FIELD_NAMES,
  NUMBER_FIELDS,
  type NumberFieldName,
  type SectionName,
  type TextFieldName,
} from './testFields.ts';

/**
 * A number as it stands in its field. The text is what was typed and is never changed behind the
 * typist's back; `inside` is its value in the unit used inside, null for an empty field. A value that came from
 * the service keeps its exact inside value until somebody types, so that showing it in inches changes nothing.
 */
export interface NumberField {
  readonly text: string;
  readonly inside: number | null;
  /** What was expected, when the text is not a number with a usable unit. */
  readonly message: string | null;
}

/** The test form as it stands, valid or not. */
export interface TestDraft {
  readonly texts: Readonly<Record<TextFieldName, string>>;
  readonly numbers: Readonly<Record<NumberFieldName, NumberField>>;
  readonly section: SectionName;
  readonly torqueDirection: 'ccw' | 'cw' | '';
}

const EMPTY_NUMBER: NumberField = { text: '', inside: null, message: null };

export function emptyDraft(): TestDraft {
  return {
    texts: { specimenId: '', testDate: '', material: '', heat: '', operator: '', remarks: '' },
    numbers: everyNumber(() => EMPTY_NUMBER),
    section: 'solid-round',
    torqueDirection: '',
  };
}

/** The form of a stored test, numbers in the units shown. */
export function draftOfTest(test: Test, system: UnitSystem): TestDraft {
  const geometry: Readonly<Record<string, unknown>> = { ...test.geometry };
  const record: Readonly<Record<string, unknown>> = { ...test };
  return {
    texts: {
      specimenId: test.specimenId,
      testDate: test.testDate ?? '',
      material: test.material ?? '',
      heat: test.heat ?? '',
      operator: test.operator ?? '',
      remarks: test.remarks ?? '',
    },
    numbers: everyNumber((name) => {
      const value = isDimension(name) ? geometry[name] : record[name];
      if (typeof value !== 'number') return EMPTY_NUMBER;
      return { text: fieldText(value, NUMBER_FIELDS[name].quantity, system), inside: value, message: null };
    }),
    section: test.geometry.section,
    torqueDirection: test.torqueDirection ?? '',
  };
}

export const withText = (draft: TestDraft, name: TextFieldName, text: string): TestDraft => ({
  ...draft,
  texts: { ...draft.texts, [name]: text },
});

/** After typing in a number field. A unit typed with the number wins over the unit shown. */
export const withNumber = (draft: TestDraft, name: NumberFieldName, text: string, system: UnitSystem): TestDraft => ({
  ...draft,
  numbers: { ...draft.numbers, [name]: readNumber(text, name, system) },
});

/** The same form in other units. Fields that hold no usable number stay as typed. */
export function inUnits(draft: TestDraft, system: UnitSystem): TestDraft {
  return {
    ...draft,
    numbers: everyNumber((name) => {
      const field = draft.numbers[name];
      if (field.inside === null) return field;
      return { ...field, text: fieldText(field.inside, NUMBER_FIELDS[name].quantity, system) };
    }),
  };
}

function readNumber(text: string, name: NumberFieldName, system: UnitSystem): NumberField {
  if (text.trim() === '') return { text, inside: null, message: null };
  const { quantity } = NUMBER_FIELDS[name];
  try {
    return {
      text,
      inside: parseQuantity(text, quantity, { defaultUnit: unitShown(quantity, system), input: 'value' }),
      message: null,
    };
  } catch (error) {
    if (error instanceof LabError) return { text, inside: null, message: error.message };
    throw error;
  }
}

function everyNumber(field: (name: NumberFieldName) => NumberField): Record<NumberFieldName, NumberField> {
  return Object.fromEntries(NUMBER_FIELD_NAMES.map((name) => [name, field(name)])) as Record<
    NumberFieldName,
    NumberField
  >;
}

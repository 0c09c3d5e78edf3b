import type { z } from 'zod';
import { TestInput } from '../../src/records/test.ts';
import { FIELD_MESSAGES } from '../texts/testForm.ts';
import { shownQuantity, type UnitSystem } from '../units/unitSystem.ts';
import type { TestDraft } from './testDraft.ts';
import {
  type FieldName,
  isDimension,
  NUMBER_FIELD_NAMES,
  NUMBER_FIELDS,
  type NumberFieldName,
  SECTION_DIMENSIONS,
} from './testFields.ts';

export interface CheckedDraft {
  /** What can be sent; null while something is wrong. */
  readonly input: TestInput | null;
  /** What the stresses can already be computed from: like `input`, but wrong optional values are left out. */
  readonly computable: TestInput | null;
  /** What is expected, beside each field that is wrong. */
  readonly messages: Readonly<Partial<Record<FieldName, string>>>;
}

/** Holds the form against the schema of the stored record; messages are in the units shown. */
export function checkDraft(draft: TestDraft, system: UnitSystem): CheckedDraft {
  const messages: Partial<Record<FieldName, string>> = {};
  const candidate = candidateOf(draft);
  const result = TestInput.safeParse(candidate);
  for (const issue of result.error?.issues ?? []) {
    const name = fieldOfPath(issue.path);
    if (name !== null) messages[name] ??= messageOfIssue(issue, name, draft, system);
  }
  for (const name of numbersAsked(draft)) {
    const { message } = draft.numbers[name];
    if (message !== null) messages[name] = message;
  }
  const right = result.success && Object.keys(messages).length === 0;
  return {
    input: right ? result.data : null,
    computable: right ? result.data : computable(candidate, messages),
    messages,
  };
}

function candidateOf(draft: TestDraft): Record<string, unknown> {
  const { texts, numbers, section } = draft;
  const geometry: Record<string, unknown> = { section };
  for (const name of SECTION_DIMENSIONS[section] ?? []) geometry[name] = numbers[name].inside ?? undefined;
  return {
    specimenId: texts.specimenId,
    testDate: texts.testDate === '' ? null : texts.testDate,
    material: orNull(texts.material),
    heat: orNull(texts.heat),
    geometry,
    gaugeLengthMm: numbers.gaugeLengthMm.inside,
    torqueMaxNm: numbers.torqueMaxNm.inside,
    torqueDirection: draft.torqueDirection === '' ? null : draft.torqueDirection,
    twistFractureDeg: numbers.twistFractureDeg.inside,
    axialForceN: numbers.axialForceN.inside,
    bendingMomentNm: numbers.bendingMomentNm.inside,
    operator: orNull(texts.operator),
    remarks: orNull(texts.remarks),
  };
}

/** The same with everything wrong left out, as long as the geometry is right. */
function computable(candidate: Record<string, unknown>, messages: CheckedDraft['messages']): TestInput | null {
  const reduced = { ...candidate };
  for (const name of Object.keys(messages)) if (name !== 'specimenId') reduced[name] = null;
  if (messages.specimenId !== undefined) reduced.specimenId = '–';
  const result = TestInput.safeParse(reduced);
  return result.success ? result.data : null;
}

function messageOfIssue(issue: z.core.$ZodIssue, name: FieldName, draft: TestDraft, system: UnitSystem): string {
  if (!isNumberField(name)) return FIELD_MESSAGES.text[name] ?? FIELD_MESSAGES.tooLong;
  const { quantity } = NUMBER_FIELDS[name];
  const came = draft.numbers[name].inside;
  if (came === null) return FIELD_MESSAGES.needed;
  const shown = (value: number) => shownQuantity(value, quantity, system, 6);
  if (issue.code === 'too_small') {
    return FIELD_MESSAGES.limit(issue.inclusive ? '≥' : '>', shown(Number(issue.minimum)), shown(came));
  }
  if (issue.code === 'too_big') {
    return FIELD_MESSAGES.limit(issue.inclusive ? '≤' : '<', shown(Number(issue.maximum)), shown(came));
  }
  if (name === 'boreMm') {
    const diameterMm = draft.numbers.diameterMm.inside;
    if (diameterMm !== null) return FIELD_MESSAGES.bore(shown(diameterMm), shown(came));
  }
  return issue.message;
}

/** `["geometry", "boreMm"]` → `boreMm`. A path nobody can fill in gives null. */
function fieldOfPath(path: readonly PropertyKey[]): FieldName | null {
  const last = path.at(-1);
  return typeof last === 'string' && last !== 'geometry' ? (last as FieldName) : null;
}

const isNumberField = (name: FieldName): name is NumberFieldName => name in NUMBER_FIELDS;

const orNull = (text: string): string | null => (text.trim() === '' ? null : text);

/** Fields the form shows now: dimensions of another section are kept, but not asked. */
const numbersAsked = (draft: TestDraft): readonly NumberFieldName[] => {
  const asked: readonly NumberFieldName[] = SECTION_DIMENSIONS[draft.section] ?? [];
  return NUMBER_FIELD_NAMES.filter((name) => asked.includes(name) || !isDimension(name));
};

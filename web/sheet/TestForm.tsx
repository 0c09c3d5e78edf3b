import { useId } from 'react';
import { TextField } from '../parts/TextField.tsx';
import { NUMBER_HINT, NUMBER_LABEL, SECTION_LABEL, TEST_FORM, TEXT_LABEL } from '../texts/testForm.ts';
import { useUnits } from '../units/UnitChoice.tsx';
import { unitLabel } from '../units/unitSystem.ts';
import type { CheckedDraft } from './checkDraft.ts';
import { type TestDraft, withNumber, withText } from './testDraft.ts';
import {
  NUMBER_FIELDS,
  type NumberFieldName,
  SECTION_DIMENSIONS,
  SECTION_NAMES,
  type TextFieldName,
} from './testFields.ts';

interface TestFormProps {
  readonly draft: TestDraft;
  readonly messages: CheckedDraft['messages'];
  readonly onDraft: (draft: TestDraft) => void;
}

/** The fields of a test. Whatever is typed stays, right or wrong; what is expected stands beside it. */
export function TestForm({ draft, messages, onDraft }: TestFormProps) {
  const text = (name: TextFieldName, more: { readonly type?: string; readonly needed?: boolean } = {}) => (
    <TextField
      key={name}
      label={TEXT_LABEL[name]}
      value={draft.texts[name]}
      message={messages[name]}
      autoComplete="off"
      onChange={(typed) => onDraft(withText(draft, name, typed))}
      {...more}
    />
  );
  const number = (name: NumberFieldName, needed = false) => (
    <QuantityField key={name} name={name} needed={needed} draft={draft} message={messages[name]} onDraft={onDraft} />
  );
  return (
    <div className="form-grid">
      {text('specimenId', { needed: true })}
      {text('testDate', { type: 'date' })}
      {text('material')}
      {text('heat')}
      <Choice
        label={TEST_FORM.section}
        value={draft.section}
        options={SECTION_NAMES.map((name) => [name, SECTION_LABEL[name] ?? name])}
        onChange={(section) => onDraft({ ...draft, section })}
      />
      {(SECTION_DIMENSIONS[draft.section] ?? []).map((name) => number(name, true))}
      {number('torqueMaxNm')}
      <Choice
        label={TEST_FORM.torqueDirection}
        hint={TEST_FORM.torqueDirectionHint}
        value={draft.torqueDirection}
        options={(['', 'ccw', 'cw'] as const).map((direction) => [direction, TEST_FORM.torqueDirections[direction]])}
        onChange={(torqueDirection) => onDraft({ ...draft, torqueDirection })}
      />
      {number('axialForceN')}
      {number('gaugeLengthMm')}
      {number('twistFractureDeg')}
      {number('bendingMomentNm')}
      {text('operator')}
      {text('remarks')}
    </div>
  );
}

interface QuantityFieldProps {
  readonly name: NumberFieldName;
  readonly needed: boolean;
  readonly draft: TestDraft;
  readonly message: string | undefined;
  readonly onDraft: (draft: TestDraft) => void;
}

function QuantityField({ name, needed, draft, message, onDraft }: QuantityFieldProps) {
  const { system } = useUnits();
  return (
    <TextField
      label={NUMBER_LABEL[name]}
      needed={needed}
      unit={unitLabel(NUMBER_FIELDS[name].quantity, system)}
      hint={NUMBER_HINT[name]}
      value={draft.numbers[name].text}
      message={message}
      inputMode="decimal"
      autoComplete="off"
      className="field-number"
      onChange={(typed) => onDraft(withNumber(draft, name, typed, system))}
    />
  );
}

interface ChoiceProps<Value extends string> {
  readonly label: string;
  readonly hint?: string;
  readonly value: Value;
  readonly options: readonly (readonly [Value, string])[];
  readonly onChange: (value: Value) => void;
}

function Choice<Value extends string>({ label, hint, value, options, onChange }: ChoiceProps<Value>) {
  const id = useId();
  return (
    <div className="field">
      <label htmlFor={id}>{label}</label>
      <span className="field-box">
        <select
          id={id}
          value={value}
          aria-describedby={hint ? `${id}-hint` : undefined}
          onChange={(event) => {
            const chosen = options.find(([option]) => option === event.target.value);
            if (chosen) onChange(chosen[0]);
          }}
        >
          {options.map(([option, title]) => (
            <option key={option} value={option}>
              {title}
            </option>
          ))}
        </select>
      </span>
      {hint && (
        <p className="field-hint" id={`${id}-hint`}>
          {hint}
        </p>
      )}
    </div>
  );
}

import { useState } from 'react';
import type { Test } from '../../src/records/test.ts';
import { asProblem } from '../api/http.ts';
import { changeTest, readSheet } from '../api/laboratory.ts';
import type { Problem } from '../api/problem.ts';
import type { TestSheet } from '../api/types.ts';
import { ProblemNote } from '../parts/ProblemNote.tsx';
import { COMMON } from '../texts/common.ts';
import { TEST_FORM } from '../texts/testForm.ts';
import { TestForm } from './TestForm.tsx';
import type { DraftControl } from './useTestDraft.ts';

interface TestPanelProps {
  readonly test: Test;
  readonly form: DraftControl;
  readonly onSaved: (sheet: TestSheet) => void;
}

/** Specimen and loads; saved only on request. When somebody else has saved meanwhile, nothing is lost: one chooses. */
export function TestPanel({ test, form, onSaved }: TestPanelProps) {
  const [busy, setBusy] = useState(false);
  const [saved, setSaved] = useState(false);
  const [problem, setProblem] = useState<Problem | null>(null);

  const guarded = async (work: () => Promise<void>) => {
    setBusy(true);
    setProblem(null);
    try {
      await work();
      setSaved(true);
    } catch (error) {
      setProblem(asProblem(error));
    } finally {
      setBusy(false);
    }
  };

  const taken = async () => {
    const sheet = await readSheet(test.id);
    form.takeOver(sheet.test);
    onSaved(sheet);
  };

  const saveOver = (version: number) =>
    guarded(async () => {
      if (form.input === null) return;
      await changeTest(test.id, version, form.input);
      await taken();
    });

  const saveOverNewest = () =>
    guarded(async () => {
      const { test: newest } = await readSheet(test.id);
      if (form.input === null) return;
      await changeTest(test.id, newest.version, form.input);
      await taken();
    });

  return (
    <section className="panel test-panel" aria-labelledby="test-title">
      <h2 id="test-title">{TEST_FORM.title}</h2>
      <form
        noValidate
        onSubmit={(event) => {
          event.preventDefault();
          void saveOver(test.version);
        }}
      >
        <TestForm draft={form.draft} messages={form.messages} onDraft={form.setDraft} />
        {problem?.code === 'changed-meanwhile' ? (
          <div className="note note-warning" role="alert">
            <p>{TEST_FORM.changedMeanwhile}</p>
            <div className="form-actions">
              <button type="button" disabled={form.input === null} onClick={() => void saveOverNewest()}>
                {TEST_FORM.keepMine}
              </button>
              <button type="button" onClick={() => void guarded(taken)}>
                {TEST_FORM.takeTheirs}
              </button>
            </div>
          </div>
        ) : (
          problem !== null && <ProblemNote problem={problem} />
        )}
        <div className="form-actions">
          <button type="submit" className="primary" disabled={busy || !form.dirty || form.input === null}>
            {COMMON.save}
          </button>
          {form.dirty && (
            <button type="button" onClick={() => form.takeOver(test)}>
              {TEST_FORM.undoChanges}
            </button>
          )}
          <span className="form-state" role="status">
            {form.dirty
              ? form.input === null
                ? TEST_FORM.correctFirst
                : TEST_FORM.unsaved
              : saved
                ? TEST_FORM.saved
                : ''}
          </span>
        </div>
      </form>
    </section>
  );
}

import { useEffect, useMemo, useRef, useState } from 'react';
import type { Test } from '../../src/records/test.ts';
import { useUnits } from '../units/UnitChoice.tsx';
import { type CheckedDraft, checkDraft } from './checkDraft.ts';
import { draftOfTest, emptyDraft, inUnits, type TestDraft } from './testDraft.ts';

export interface DraftControl extends CheckedDraft {
  readonly draft: TestDraft;
  readonly dirty: boolean;
  readonly setDraft: (draft: TestDraft) => void;
  /** Fills the form from a stored test; what was typed is dropped. */
  readonly takeOver: (test: Test) => void;
}

/** The form of a test (null: a new one), checked at every stroke, in the units chosen. */
export function useTestDraft(test: Test | null): DraftControl {
  const { system } = useUnits();
  const [draft, setDraft] = useState<TestDraft>(() => (test === null ? emptyDraft() : draftOfTest(test, system)));
  const [dirty, setDirty] = useState(false);

  const shownIn = useRef(system);
  useEffect(() => {
    if (shownIn.current === system) return;
    shownIn.current = system;
    setDraft((before) => inUnits(before, system));
  }, [system]);

  const checked = useMemo(() => checkDraft(draft, system), [draft, system]);
  return {
    ...checked,
    draft,
    dirty,
    setDraft: (next) => {
      setDraft(next);
      setDirty(true);
    },
    takeOver: (stored) => {
      setDraft(draftOfTest(stored, system));
      setDirty(false);
    },
  };
}

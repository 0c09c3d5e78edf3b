import { useEffect, useState } from 'react';
import { asProblem } from '../api/http.ts';
import { createTest } from '../api/laboratory.ts';
import type { Problem } from '../api/problem.ts';
import { ProblemNote } from '../parts/ProblemNote.tsx';
import { useLeaveGuard } from '../parts/useLeaveGuard.ts';
import { goTo } from '../routing/useRoute.ts';
import { COMMON } from '../texts/common.ts';
import { STRESSES } from '../texts/statement.ts';
import { TEST_FORM } from '../texts/testForm.ts';
import { FigurePanel } from './FigurePanel.tsx';
import { StressPanel } from './StressPanel.tsx';
import { TestForm } from './TestForm.tsx';
import { useLiveAssessment } from './useLiveAssessment.ts';
import { useTestDraft } from './useTestDraft.ts';

/** Entering a test: stresses and planes appear while one types; photos come on the sheet that opens then. */
export function NewTestPage() {
  const form = useTestDraft(null);
  const [tried, setTried] = useState(false);
  const [createdId, setCreatedId] = useState<string | null>(null);
  const [problem, setProblem] = useState<Problem | null>(null);
  const { assessment } = useLiveAssessment(form.computable, NO_READINGS, null);
  useLeaveGuard(form.dirty && createdId === null);

  useEffect(() => {
    // In an effect, so that the guard is gone before the page leaves.
    if (createdId !== null) goTo({ place: 'sheet', testId: createdId });
  }, [createdId]);

  const create = async () => {
    setTried(true);
    if (form.input === null) return;
    try {
      setCreatedId((await createTest(form.input)).id);
    } catch (error) {
      setProblem(asProblem(error));
    }
  };

  return (
    <article className="sheet">
      <header className="sheet-header">
        <h1>{COMMON.newTest}</h1>
      </header>
      <div className="sheet-grid new-test">
        <section className="panel test-panel" aria-labelledby="test-title">
          <h2 id="test-title">{TEST_FORM.title}</h2>
          <form
            noValidate
            onSubmit={(event) => {
              event.preventDefault();
              void create();
            }}
          >
            <TestForm
              draft={form.draft}
              messages={tried ? form.messages : typedMessages(form)}
              onDraft={form.setDraft}
            />
            {problem !== null && <ProblemNote problem={problem} />}
            <div className="form-actions">
              <button type="submit" className="primary">
                {TEST_FORM.create}
              </button>
              <span className="form-state" role="status">
                {tried && form.input === null ? TEST_FORM.correctFirst : ''}
              </span>
            </div>
          </form>
        </section>
        <section className="panel analysis" aria-labelledby="stresses-title">
          <h2 id="stresses-title">{STRESSES.title}</h2>
          <FigurePanel assessment={assessment} reading={null} />
          <StressPanel assessment={assessment} />
        </section>
      </div>
    </article>
  );
}

const NO_READINGS: readonly never[] = [];

/** Before the first try, an empty field is not yet a mistake. */
function typedMessages({ messages, draft }: ReturnType<typeof useTestDraft>): typeof messages {
  const typed = (name: string): boolean => {
    if (name in draft.numbers) return draft.numbers[name as keyof typeof draft.numbers].text.trim() !== '';
    return name in draft.texts && draft.texts[name as keyof typeof draft.texts].trim() !== '';
  };
  return Object.fromEntries(Object.entries(messages).filter(([name]) => typed(name)));
}

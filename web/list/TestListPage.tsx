import { useDeferredValue, useId, useState } from 'react';
import { asProblem } from '../api/http.ts';
import { listTests, readLaboratory } from '../api/laboratory.ts';
import type { Problem } from '../api/problem.ts';
import type { TestPage } from '../api/types.ts';
import { useResource } from '../api/useResource.ts';
import { ProblemNote } from '../parts/ProblemNote.tsx';
import { COMMON } from '../texts/common.ts';
import { LIST } from '../texts/list.ts';
import { EmptyLaboratory } from './EmptyLaboratory.tsx';
import { TestTable } from './TestTable.tsx';

const PAGE_LENGTH = 50;

/** The tests of the laboratory, newest first, with search; an empty laboratory says how to begin. */
export function TestListPage() {
  const [text, setText] = useState('');
  const asked = useDeferredValue(text);
  const laboratory = useResource('laboratory', readLaboratory);
  const list = useResource(`tests/${asked}`, (signal) => listTests({ text: asked, limit: PAGE_LENGTH }, signal));
  const [problem, setProblem] = useState<Problem | null>(null);
  const searchId = useId();

  const more = async (page: TestPage) => {
    if (page.nextCursor === null) return;
    setProblem(null);
    try {
      const next = await listTests({ text: asked, limit: PAGE_LENGTH, cursor: page.nextCursor });
      list.setValue({ ...next, tests: [...page.tests, ...next.tests] });
    } catch (error) {
      setProblem(asProblem(error));
    }
  };

  if (laboratory.value?.tests === 0) {
    return (
      <EmptyLaboratory
        demoAvailable={laboratory.value.demoAvailable}
        onLoaded={() => {
          laboratory.reload();
          list.reload();
        }}
      />
    );
  }
  const page = list.value;
  const refusal = problem ?? list.problem;
  return (
    <article className="list-page">
      <header className="list-header">
        <h1>{LIST.title}</h1>
        <search className="search">
          <label htmlFor={searchId}>{LIST.search}</label>
          <input
            id={searchId}
            type="search"
            value={text}
            placeholder={LIST.searchHint}
            onChange={(event) => setText(event.target.value)}
          />
        </search>
        <p className="count" role="status">
          {page === null ? '' : page.total === 1 ? LIST.one : LIST.count(page.tests.length, page.total)}
        </p>
      </header>
      {refusal !== null && <ProblemNote problem={refusal} onTryAgain={list.reload} />}
      {page === null ? (
        refusal === null && <p className="waiting">{COMMON.loading}</p>
      ) : page.tests.length === 0 ? (
        <p className="waiting">{LIST.found(asked)}</p>
      ) : (
        <TestTable tests={page.tests} />
      )}
      {page !== null && page.nextCursor !== null && (
        <p className="more">
          <button type="button" onClick={() => void more(page)}>
            {LIST.more}
          </button>
        </p>
      )}
    </article>
  );
}

import { useState } from 'react';
import { asProblem } from '../api/http.ts';
import { loadDemoLaboratory } from '../api/laboratory.ts';
import type { Problem } from '../api/problem.ts';
import { ProblemNote } from '../parts/ProblemNote.tsx';
import { Link } from '../routing/Link.tsx';
import { LIST } from '../texts/list.ts';

interface EmptyLaboratoryProps {
  readonly demoAvailable: boolean;
  readonly onLoaded: () => void;
}

/** The three ways to begin. */
export function EmptyLaboratory({ demoAvailable, onLoaded }: EmptyLaboratoryProps) {
  const [busy, setBusy] = useState(false);
  const [problem, setProblem] = useState<Problem | null>(null);
  const load = async () => {
    setBusy(true);
    setProblem(null);
    try {
      await loadDemoLaboratory();
      onLoaded();
    } catch (error) {
      setProblem(asProblem(error));
      setBusy(false);
    }
  };
  return (
    <article className="empty-laboratory">
      <h1>{LIST.emptyTitle}</h1>
      {problem !== null && <ProblemNote problem={problem} />}
      <ul className="beginnings">
        {demoAvailable && (
          <li className="panel">
            <p>{LIST.emptyDemoDetail}</p>
            <button type="button" className="primary" disabled={busy} onClick={() => void load()}>
              {LIST.emptyDemo}
            </button>
            {busy && (
              <p className="waiting" role="status">
                {LIST.emptyDemoBusy}
              </p>
            )}
          </li>
        )}
        <li className="panel">
          <p>{LIST.emptyEnterDetail}</p>
          <Link to={{ place: 'new-test' }} className="button">
            {LIST.emptyEnter}
          </Link>
        </li>
        <li className="panel">
          <p>{LIST.emptyImportDetail}</p>
          <Link to={{ place: 'import' }} className="button">
            {LIST.emptyImport}
          </Link>
        </li>
      </ul>
    </article>
  );
}

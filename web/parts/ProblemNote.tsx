import type { Problem } from '../api/problem.ts';
import { COMMON } from '../texts/common.ts';

interface ProblemNoteProps {
  readonly problem: Problem;
  readonly onTryAgain?: () => void;
}

/** A refusal: what was wrong, and what to do. */
export function ProblemNote({ problem, onTryAgain }: ProblemNoteProps) {
  return (
    <div className="note note-problem" role="alert">
      <p>
        <strong>{problem.message}</strong>
      </p>
      {problem.fix !== undefined && <p>{problem.fix}</p>}
      {onTryAgain && (
        <button type="button" onClick={onTryAgain}>
          {COMMON.tryAgain}
        </button>
      )}
    </div>
  );
}

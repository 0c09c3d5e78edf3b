import { readSheet } from '../api/laboratory.ts';
import { useResource } from '../api/useResource.ts';
import { ProblemNote } from '../parts/ProblemNote.tsx';
import { Link } from '../routing/Link.tsx';
import { COMMON } from '../texts/common.ts';
import { SHEET } from '../texts/statement.ts';
import { SheetView } from './SheetView.tsx';

/** The sheet of one test, read from the service. */
export function SheetPage({ testId }: { readonly testId: string }) {
  const sheet = useResource(`sheet/${testId}`, (signal) => readSheet(testId, signal));
  if (sheet.value === null) {
    if (sheet.problem === null) return <p className="waiting">{COMMON.loading}</p>;
    return (
      <div className="narrow">
        {sheet.problem.status === 404 ? (
          <h1>{SHEET.missing}</h1>
        ) : (
          <ProblemNote problem={sheet.problem} onTryAgain={sheet.reload} />
        )}
        <Link to={{ place: 'tests' }}>{SHEET.backToList}</Link>
      </div>
    );
  }
  return <SheetView sheet={sheet.value} onSheet={sheet.setValue} />;
}

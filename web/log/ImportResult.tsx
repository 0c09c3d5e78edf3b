import { refusedRowsAddress } from '../api/laboratory.ts';
import type { LogImport, Refusal } from '../api/types.ts';
import { Link } from '../routing/Link.tsx';
import { COMMON } from '../texts/common.ts';
import { IMPORT } from '../texts/importLog.ts';

/** What an import did, or would do, and every refused row with its reason. */
export function ImportResult({ result, dryRun }: { readonly result: LogImport; readonly dryRun: boolean }) {
  const counts = [
    [IMPORT.rows, result.rows],
    [dryRun ? IMPORT.wouldStore : IMPORT.stored, result.stored],
    [IMPORT.updated, result.updated],
    [IMPORT.unchanged, result.unchanged],
    [IMPORT.refused, result.refused],
    [IMPORT.photosQueued, result.photosQueued],
    [IMPORT.photosMeasured, result.photosMeasured],
  ] as const;
  return (
    <section className="panel import-result" aria-labelledby="import-result-title">
      <h2 id="import-result-title" role="status">
        {dryRun ? IMPORT.checkedTitle : IMPORT.storedTitle}
      </h2>
      <dl className="counts">
        {counts.map(([name, count]) => (
          <div key={name} className={name === IMPORT.refused && count > 0 ? 'count-refused' : undefined}>
            <dt>{name}</dt>
            <dd>{count}</dd>
          </div>
        ))}
      </dl>
      {result.refusals.length === 0 ? <p>{IMPORT.nothingRefused}</p> : <Refusals result={result} dryRun={dryRun} />}
      {result.photoProblems.length > 0 && (
        <Sentences
          title={IMPORT.photoProblemsTitle(result.photoProblems.length)}
          sentences={result.photoProblems.map((p) => IMPORT.photoProblem(p.line, p.specimenId, p.photo, p.message))}
        />
      )}
      {result.notes.length > 0 && <Sentences title={IMPORT.notesTitle} sentences={result.notes} />}
      {!dryRun && (
        <Link to={{ place: 'tests' }} className="button">
          {IMPORT.toTests}
        </Link>
      )}
    </section>
  );
}

function Sentences({ title, sentences }: { readonly title: string; readonly sentences: readonly string[] }) {
  return (
    <div className="sentences">
      <h3>{title}</h3>
      <ul>
        {sentences.map((sentence) => (
          <li key={sentence}>{sentence}</li>
        ))}
      </ul>
    </div>
  );
}

function Refusals({ result, dryRun }: { readonly result: LogImport; readonly dryRun: boolean }) {
  return (
    <div className="refusals">
      <h3>{IMPORT.refusedTitle(result.refused)}</h3>
      <p>
        {!dryRun && `${IMPORT.refusedDetail} `}
        {result.id !== undefined && (
          <a href={refusedRowsAddress(result.id)} download>
            {IMPORT.download}
          </a>
        )}
      </p>
      {/* biome-ignore lint/a11y/noNoninteractiveTabindex: a table wider than the page is scrolled by keyboard */}
      <section className="table-scroll" tabIndex={0} aria-label={IMPORT.refused}>
        <table>
          <thead>
            <tr>
              <th scope="col" className="numeric">
                {IMPORT.line}
              </th>
              <th scope="col">{IMPORT.column}</th>
              <th scope="col">{IMPORT.value}</th>
              <th scope="col">{IMPORT.reason}</th>
            </tr>
          </thead>
          <tbody>
            {result.refusals.map((refusal) => (
              <tr key={refusalKey(refusal)}>
                <td className="numeric">{refusal.line}</td>
                <td>{refusal.column ?? COMMON.none}</td>
                <td className="refused-value">
                  {refusal.value === null || refusal.value === '' ? COMMON.none : refusal.value}
                </td>
                <td>{refusal.message}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </section>
    </div>
  );
}

const refusalKey = ({ line, column, code, message }: Refusal): string => `${line}/${column ?? ''}/${code}/${message}`;

import type { Test } from '../../src/records/test.ts';
import { reportAddress } from '../api/laboratory.ts';
import { SHEET } from '../texts/statement.ts';
import { TEXT_LABEL } from '../texts/testForm.ts';

/** Which test this is, and its report. */
export function SheetHeader({ test }: { readonly test: Test }) {
  const facts = [
    [TEXT_LABEL.material, test.material],
    [TEXT_LABEL.heat, test.heat],
    [TEXT_LABEL.testDate, test.testDate],
    [TEXT_LABEL.operator, test.operator],
  ] as const;
  return (
    <header className="sheet-header">
      <div>
        <h1>{test.specimenId}</h1>
        <p className="facts">
          {facts.map(([label, value]) =>
            value === null ? null : (
              <span key={label}>
                {label} <strong>{value}</strong>
              </span>
            ),
          )}
        </p>
      </div>
      <a className="button" href={reportAddress(test.id)} download>
        {SHEET.pdf}
      </a>
    </header>
  );
}

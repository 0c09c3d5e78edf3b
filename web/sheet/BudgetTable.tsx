import type { BudgetLine } from '../../src/records/reading.ts';
import { STATEMENT } from '../texts/statement.ts';

/** The uncertainty budget of a reading, opened on demand. */
export function BudgetTable({ budget }: { readonly budget: readonly BudgetLine[] }) {
  return (
    <details className="budget">
      <summary>{STATEMENT.budget}</summary>
      <table>
        <thead>
          <tr>
            <th scope="col">{STATEMENT.budgetComponent}</th>
            <th scope="col" className="numeric">
              {STATEMENT.budgetStandard}
            </th>
            <th scope="col">{STATEMENT.budgetHow}</th>
          </tr>
        </thead>
        <tbody>
          {budget.map(({ component, standardUncertaintyDeg, explanation }) => (
            <tr key={component}>
              <th scope="row">{component}</th>
              <td className="numeric">{standardUncertaintyDeg.toFixed(2)}°</td>
              <td>{explanation}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </details>
  );
}

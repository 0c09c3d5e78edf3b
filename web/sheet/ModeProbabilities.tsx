import type { FailureModeStatement } from '../../src/verdict/model.ts';
import { degreesText, percentText } from '../../src/verdict/wording.ts';
import { MODE_SHORT, PLANE } from '../texts/modes.ts';
import { STATEMENT } from '../texts/statement.ts';

const MODES = ['normal-stress', 'shear-transverse', 'shear-longitudinal'] as const;

/** Probability of each mode as a bar with the threshold of the rule on it, and of each plane as a number. */
export function ModeProbabilities({ statement }: { readonly statement: FailureModeStatement }) {
  const { modeProbabilities, cells, rule } = statement;
  return (
    <div className="probabilities">
      <h3>{STATEMENT.probabilities}</h3>
      <ul className="bars">
        {MODES.map((mode) => (
          <li key={mode}>
            <span className="bar-label">{MODE_SHORT[mode]}</span>
            <svg className="bar" viewBox="0 0 100 8" preserveAspectRatio="none" aria-hidden="true">
              <rect className="bar-ground" width="100" height="8" />
              <rect className={`bar-fill mode-fill-${mode}`} width={100 * modeProbabilities[mode]} height="8" />
              <path className="bar-limit" d={`M${100 * rule.minimumProbability} 0V8`} />
            </svg>
            <span className="bar-value">{percentText(modeProbabilities[mode])}</span>
          </li>
        ))}
      </ul>
      <p className="cells">
        {STATEMENT.cells}:{' '}
        {cells
          .map(
            ({ plane, planeAngleDeg, probability }) =>
              `${PLANE[plane].toLowerCase()} (${degreesText(planeAngleDeg)}) ${percentText(probability)}`,
          )
          .join(', ')}
      </p>
    </div>
  );
}

import type { Assessment } from '../../src/verdict/model.ts';
import { degreesText } from '../../src/verdict/wording.ts';
import { PLANE } from '../texts/modes.ts';
import { STRESSES } from '../texts/statement.ts';
import { useUnits } from '../units/UnitChoice.tsx';
import { shownQuantity } from '../units/unitSystem.ts';

/** Stresses and planes, at once from what stands in the form. */
export function StressPanel({ assessment }: { readonly assessment: Assessment | null }) {
  const { system } = useUnits();
  if (assessment === null) return <p className="waiting">{STRESSES.invalid}</p>;
  const { stress, planes } = assessment;
  const shown = (valueMPa: number) => shownQuantity(valueMPa, 'stress', system);
  return (
    <div className="stresses">
      {stress === null ? (
        <p className="waiting">{STRESSES.unknown}</p>
      ) : (
        <dl className="numbers">
          {[stress.elastic, stress.fullyPlastic].map((value) => (
            <div key={value.kind}>
              <dt>
                {value.kind === 'elastic' ? STRESSES.elastic : STRESSES.fullyPlastic}
                {value.kind === stress.quoted.kind && <span className="tag">{STRESSES.quoted}</span>}
              </dt>
              <dd data-testid={`stress-${value.kind}`}>{shown(value.shearStressMPa)}</dd>
            </div>
          ))}
          <div>
            <dt>{STRESSES.sigma1}</dt>
            <dd>{shown(stress.sigma1MPa)}</dd>
          </div>
          {stress.surface.sigmaXMPa !== 0 && (
            <div>
              <dt>{STRESSES.axial}</dt>
              <dd>{shown(stress.surface.sigmaXMPa)}</dd>
            </div>
          )}
        </dl>
      )}
      <table className="planes">
        <thead>
          <tr>
            <th scope="col">{STRESSES.plane}</th>
            <th scope="col" className="numeric">
              {STRESSES.angle}
            </th>
            {stress !== null && (
              <>
                <th scope="col" className="numeric">
                  {STRESSES.normal}
                </th>
                <th scope="col" className="numeric">
                  {STRESSES.shear}
                </th>
              </>
            )}
          </tr>
        </thead>
        <tbody>
          {planes.map(({ plane, planeAngleDeg, normalStressMPa, shearStressMPa }) => (
            <tr key={plane}>
              <th scope="row">{PLANE[plane]}</th>
              <td className="numeric">{degreesText(planeAngleDeg)}</td>
              {stress !== null && (
                <>
                  <td className="numeric">{shown(normalStressMPa)}</td>
                  <td className="numeric">{shown(shearStressMPa)}</td>
                </>
              )}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}

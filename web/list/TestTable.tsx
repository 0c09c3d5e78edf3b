import type { KeyboardEvent, MouseEvent } from 'react';
import { percentText } from '../../src/verdict/wording.ts';
import type { TestRow } from '../api/types.ts';
import { angleWithUncertainty } from '../format/uncertainty.ts';
import { Link } from '../routing/Link.tsx';
import { goTo } from '../routing/useRoute.ts';
import { COMMON } from '../texts/common.ts';
import { LIST } from '../texts/list.ts';
import { MODE_SHORT } from '../texts/modes.ts';
import { useUnits } from '../units/UnitChoice.tsx';
import { shownQuantity } from '../units/unitSystem.ts';
import { sectionText } from './sectionText.ts';

/** One line a test; the whole line opens it, the specimen is the link for keyboard and new windows. */
export function TestTable({ tests }: { readonly tests: readonly TestRow[] }) {
  return (
    // biome-ignore lint/a11y/noNoninteractiveTabindex: a table wider than the page is scrolled by keyboard
    <section className="table-scroll" tabIndex={0} aria-label={LIST.title}>
      <table className="test-table">
        <thead>
          <tr>
            <th scope="col">{LIST.specimen}</th>
            <th scope="col">{LIST.date}</th>
            <th scope="col">{LIST.material}</th>
            <th scope="col">{LIST.heat}</th>
            <th scope="col">{LIST.section}</th>
            <th scope="col" className="numeric">
              {LIST.torque}
            </th>
            <th scope="col" className="numeric">
              {LIST.angle}
            </th>
            <th scope="col">{LIST.mode}</th>
            <th scope="col" className="numeric">
              {LIST.photos}
            </th>
            <th scope="col">{LIST.flags}</th>
          </tr>
        </thead>
        <tbody>
          {tests.map((test) => (
            <TestLine key={test.id} test={test} />
          ))}
        </tbody>
      </table>
    </section>
  );
}

function TestLine({ test }: { readonly test: TestRow }) {
  const { system } = useUnits();
  const open = (event: MouseEvent | KeyboardEvent) => {
    if (event.target instanceof Element && event.target.closest('a')) return;
    goTo({ place: 'sheet', testId: test.id });
  };
  return (
    <tr onClick={open}>
      <th scope="row">
        <Link to={{ place: 'sheet', testId: test.id }}>{test.specimenId}</Link>
      </th>
      <td className="numeric-left">{test.testDate ?? COMMON.none}</td>
      <td>{test.material ?? COMMON.none}</td>
      <td>{test.heat ?? COMMON.none}</td>
      <td>{sectionText(test.geometry, system)}</td>
      <td className="numeric">
        {test.torqueMaxNm === null ? COMMON.none : shownQuantity(test.torqueMaxNm, 'torque', system)}
      </td>
      <td className="numeric">
        {test.planeAngleDeg === null || test.expandedUncertaintyDeg === null
          ? LIST.noReading
          : angleWithUncertainty(test.planeAngleDeg, test.expandedUncertaintyDeg)}
      </td>
      <td>
        {test.mode !== null && (
          <>
            <span className={`mode-chip mode-${test.mode}`}>{MODE_SHORT[test.mode]}</span>
            {test.probability !== null && <span className="probability">{percentText(test.probability)}</span>}
          </>
        )}
      </td>
      <td className="numeric">{test.photoCount}</td>
      <td className="flags">
        {test.flags.map(({ code, sentence }) => (
          <span key={code} className="flag">
            {sentence}
          </span>
        ))}
      </td>
    </tr>
  );
}

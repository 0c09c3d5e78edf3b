import { useState } from 'react';
import type { Reading } from '../../src/records/reading.ts';
import { asProblem } from '../api/http.ts';
import { setReadingAside } from '../api/laboratory.ts';
import type { Problem } from '../api/problem.ts';
import { shownMoment } from '../format/moment.ts';
import { angleWithUncertainty } from '../format/uncertainty.ts';
import { ProblemNote } from '../parts/ProblemNote.tsx';
import { TextField } from '../parts/TextField.tsx';
import { COMMON } from '../texts/common.ts';
import { METHOD, SHAPE } from '../texts/modes.ts';
import { READINGS } from '../texts/readings.ts';

interface ReadingsPanelProps {
  readonly readings: readonly Reading[];
  readonly governingId: string | null;
  readonly onChanged: () => void;
}

/** Every reading of a test, side by side; none is ever changed or deleted, only set aside with a reason. */
export function ReadingsPanel({ readings, governingId, onChanged }: ReadingsPanelProps) {
  const [asked, setAsked] = useState<Reading | null>(null);
  const newestFirst = [...readings].sort((a, b) => (a.createdAt < b.createdAt ? 1 : -1));
  return (
    <section className="panel readings" aria-labelledby="readings-title">
      <h2 id="readings-title">{READINGS.title}</h2>
      {readings.length === 0 ? (
        <p className="waiting">{READINGS.none}</p>
      ) : (
        // biome-ignore lint/a11y/noNoninteractiveTabindex: a table wider than its panel is scrolled by keyboard
        <section className="table-scroll" tabIndex={0} aria-labelledby="readings-title">
          <table>
            <thead>
              <tr>
                <th scope="col">{READINGS.method}</th>
                <th scope="col" className="numeric">
                  {READINGS.angle}
                </th>
                <th scope="col">{READINGS.shape}</th>
                <th scope="col">{READINGS.by}</th>
                <th scope="col">{READINGS.when}</th>
                <th scope="col">{READINGS.use}</th>
              </tr>
            </thead>
            <tbody>
              {newestFirst.map((reading) => (
                <ReadingRow
                  key={reading.id}
                  reading={reading}
                  governing={reading.id === governingId}
                  onAsk={() => setAsked(reading)}
                />
              ))}
            </tbody>
          </table>
        </section>
      )}
      {asked !== null && (
        <SetAsideForm
          key={asked.id}
          reading={asked}
          onDone={() => {
            setAsked(null);
            onChanged();
          }}
          onCancel={() => setAsked(null)}
        />
      )}
    </section>
  );
}

function ReadingRow({
  reading,
  governing,
  onAsk,
}: {
  readonly reading: Reading;
  readonly governing: boolean;
  readonly onAsk: () => void;
}) {
  const { method, result, operator, instrument, engineVersion, createdAt, setAside, remarks } = reading;
  const measured = result.outcome !== 'not-measured';
  return (
    <tr className={setAside ? 'is-set-aside' : governing ? 'is-governing' : undefined}>
      <th scope="row">
        {METHOD[method]}
        {governing && <span className="tag">{READINGS.governing}</span>}
        {remarks !== null && <span className="sub">{remarks}</span>}
      </th>
      <td className="numeric">
        {measured ? angleWithUncertainty(result.planeAngleDeg, result.expandedUncertaintyDeg) : READINGS.notMeasured}
      </td>
      <td>
        {measured ? SHAPE[result.shape] : result.reason.message}
        {measured && result.planeTiltDeg !== null && (
          <span className="sub">
            {READINGS.tilt(
              angleWithUncertainty(
                result.planeTiltDeg,
                result.planeTiltExpandedUncertaintyDeg ?? result.expandedUncertaintyDeg,
              ),
            )}
          </span>
        )}
      </td>
      <td>{[operator, instrument, engineVersion].filter((part) => part !== null).join(', ') || COMMON.none}</td>
      <td className="numeric">{shownMoment(createdAt)}</td>
      <td>
        <button type="button" onClick={onAsk}>
          {setAside ? READINGS.takeBack : READINGS.setAsideDo}
        </button>
      </td>
    </tr>
  );
}

interface SetAsideFormProps {
  readonly reading: Reading;
  readonly onDone: () => void;
  readonly onCancel: () => void;
}

function SetAsideForm({ reading, onDone, onCancel }: SetAsideFormProps) {
  const [why, setWhy] = useState('');
  const [tried, setTried] = useState(false);
  const [problem, setProblem] = useState<Problem | null>(null);
  const send = () => {
    setTried(true);
    if (why.trim() === '') return;
    setReadingAside(reading.id, !reading.setAside, why.trim()).then(onDone, (error) => setProblem(asProblem(error)));
  };
  return (
    <form
      className="inline-form"
      onSubmit={(event) => {
        event.preventDefault();
        send();
      }}
    >
      <h3>{reading.setAside ? READINGS.whyBack : READINGS.whyTitle}</h3>
      <TextField
        label={READINGS.why}
        value={why}
        onChange={setWhy}
        autoFocus
        needed
        maxLength={2000}
        message={tried && why.trim() === '' ? READINGS.whyNeeded : undefined}
      />
      {problem !== null && <ProblemNote problem={problem} />}
      <div className="form-actions">
        <button type="submit" className="primary">
          {reading.setAside ? READINGS.takeBack : READINGS.setAsideDo}
        </button>
        <button type="button" onClick={onCancel}>
          {COMMON.cancel}
        </button>
      </div>
    </form>
  );
}

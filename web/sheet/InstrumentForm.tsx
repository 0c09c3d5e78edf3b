import { useState } from 'react';
import { asProblem } from '../api/http.ts';
import { addReading } from '../api/laboratory.ts';
import type { Problem } from '../api/problem.ts';
import type { ReadingAdded } from '../api/types.ts';
import { ProblemNote } from '../parts/ProblemNote.tsx';
import { TextField } from '../parts/TextField.tsx';
import { INSTRUMENT } from '../texts/readings.ts';
import { checkInstrument, EMPTY_INSTRUMENT, type InstrumentDraft } from './instrumentDraft.ts';

interface InstrumentFormProps {
  readonly testId: string;
  readonly onAdded: (added: ReadingAdded) => void;
}

/** An angle read with a protractor, a microscope or the like, with its uncertainty. */
export function InstrumentForm({ testId, onAdded }: InstrumentFormProps) {
  const [draft, setDraft] = useState<InstrumentDraft>(EMPTY_INSTRUMENT);
  const [tried, setTried] = useState(false);
  const [busy, setBusy] = useState(false);
  const [problem, setProblem] = useState<Problem | null>(null);
  const { reading, messages } = checkInstrument(draft);
  const shownMessages = tried ? messages : {};
  const set = (name: keyof InstrumentDraft) => (text: string) => setDraft({ ...draft, [name]: text });

  const send = async () => {
    setTried(true);
    if (reading === null) return;
    setBusy(true);
    setProblem(null);
    try {
      onAdded(await addReading(testId, reading));
      setDraft({ ...EMPTY_INSTRUMENT, instrument: draft.instrument, operator: draft.operator });
      setTried(false);
    } catch (error) {
      setProblem(asProblem(error));
    } finally {
      setBusy(false);
    }
  };

  return (
    <details className="panel instrument">
      <summary>
        <h2>{INSTRUMENT.title}</h2>
      </summary>
      <form
        noValidate
        onSubmit={(event) => {
          event.preventDefault();
          void send();
        }}
      >
        <div className="form-grid">
          <TextField
            label={INSTRUMENT.angle}
            needed
            unit="°"
            inputMode="decimal"
            hint={INSTRUMENT.angleHint}
            value={draft.angle}
            onChange={set('angle')}
            message={shownMessages.angle}
          />
          <TextField
            label={INSTRUMENT.uncertainty}
            needed
            unit="°"
            inputMode="decimal"
            value={draft.uncertainty}
            onChange={set('uncertainty')}
            message={shownMessages.uncertainty}
          />
          <TextField
            label={INSTRUMENT.instrument}
            needed
            value={draft.instrument}
            onChange={set('instrument')}
            message={shownMessages.instrument}
            maxLength={200}
          />
          <TextField
            label={INSTRUMENT.operator}
            value={draft.operator}
            onChange={set('operator')}
            autoComplete="name"
            maxLength={200}
          />
          <TextField label={INSTRUMENT.remarks} value={draft.remarks} onChange={set('remarks')} maxLength={2000} />
        </div>
        {problem !== null && <ProblemNote problem={problem} />}
        <div className="form-actions">
          <button type="submit" className="primary" disabled={busy}>
            {INSTRUMENT.save}
          </button>
        </div>
      </form>
    </details>
  );
}

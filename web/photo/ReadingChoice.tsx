import { useId } from 'react';
import type { Reading } from '../../src/records/reading.ts';
import { shownMoment } from '../format/moment.ts';
import { angleWithUncertainty } from '../format/uncertainty.ts';
import { METHOD } from '../texts/modes.ts';
import { PHOTO } from '../texts/photo.ts';
import { READINGS } from '../texts/readings.ts';

interface ReadingChoiceProps {
  readonly readings: readonly Reading[];
  readonly shownId: string | null;
  readonly onChoose: (readingId: string) => void;
}

/** Which of several readings of a photo is drawn on it. */
export function ReadingChoice({ readings, shownId, onChoose }: ReadingChoiceProps) {
  const id = useId();
  return (
    <span className="reading-choice">
      <label htmlFor={id}>{PHOTO.showReading}</label>
      <select id={id} value={shownId ?? ''} onChange={(event) => onChoose(event.target.value)}>
        {readings.map((reading) => (
          <option key={reading.id} value={reading.id}>
            {readingTitle(reading)}
          </option>
        ))}
      </select>
    </span>
  );
}

function readingTitle({ method, result, createdAt, setAside }: Reading): string {
  const value =
    result.outcome === 'not-measured'
      ? READINGS.notMeasured
      : angleWithUncertainty(result.planeAngleDeg, result.expandedUncertaintyDeg);
  return `${METHOD[method]}: ${value}, ${shownMoment(createdAt)}${setAside ? ` (${READINGS.setAside})` : ''}`;
}

import { useMemo, useState } from 'react';
import type { Photo } from '../../src/records/laboratoryRecords.ts';
import type { Reading } from '../../src/records/reading.ts';
import { uprightPhotoAddress } from '../api/laboratory.ts';
import { PHOTO } from '../texts/photo.ts';
import { NotMeasured } from './NotMeasured.tsx';
import { PhotoView } from './PhotoView.tsx';
import { ReadingChoice } from './ReadingChoice.tsx';
import { readingsOnPhoto, readingToShow, uprightSize } from './stateOfPhoto.ts';
import type { PhotoSize } from './traceScene.ts';

interface PhotoPanelProps {
  readonly photos: readonly Photo[];
  readonly readings: readonly Reading[];
  /** The reading the statement rests on. */
  readonly governingId: string | null;
  readonly selected: Photo;
  readonly busy: boolean;
  readonly onSelect: (sha256: string) => void;
  readonly onCorrect: (from: Reading | null, photo: PhotoSize) => void;
  readonly onMeasureAgain: () => void;
}

/** The photos of a test, one of them large, with what a reading found on it. */
export function PhotoPanel(props: PhotoPanelProps) {
  const { photos, readings, governingId, selected, busy, onSelect, onCorrect, onMeasureAgain } = props;
  const onPhoto = useMemo(() => readingsOnPhoto(selected, readings), [selected, readings]);
  const [chosenId, setChosenId] = useState<string | null>(null);
  const shown = onPhoto.find((reading) => reading.id === chosenId) ?? readingToShow(onPhoto, governingId);
  // A new object each render would fit the photo anew each time, so the size is kept by its numbers.
  const size = useStableSize(uprightSize(selected, onPhoto));

  return (
    <>
      {size === null ? (
        <p className="no-photo">{PHOTO.unreadable}</p>
      ) : (
        <PhotoView
          key={selected.sha256}
          sha256={selected.sha256}
          fileName={selected.fileName}
          photo={size}
          reading={shown}
        />
      )}
      {shown?.result.outcome === 'not-measured' && <NotMeasured reason={shown.result.reason} />}
      <div className="photo-actions">
        {size !== null && (
          <button
            type="button"
            className={shown?.result.outcome === 'not-measured' ? 'primary' : ''}
            onClick={() => onCorrect(shown, size)}
          >
            {shown?.result.outcome === 'measured' ? PHOTO.correct : PHOTO.setByHand}
          </button>
        )}
        <button type="button" disabled={busy} onClick={onMeasureAgain}>
          {busy ? PHOTO.measuring : PHOTO.measureAgain}
        </button>
        {onPhoto.length > 1 && <ReadingChoice readings={onPhoto} shownId={shown?.id ?? null} onChoose={setChosenId} />}
      </div>
      {photos.length > 1 && (
        <ul className="photo-strip">
          {photos.map((photo, index) => (
            <li key={photo.sha256}>
              <button
                type="button"
                aria-pressed={photo.sha256 === selected.sha256}
                aria-label={PHOTO.photoOf(index + 1, photos.length, photo.fileName)}
                onClick={() => onSelect(photo.sha256)}
              >
                <img src={uprightPhotoAddress(photo.sha256, 240)} alt="" loading="lazy" />
              </button>
            </li>
          ))}
        </ul>
      )}
    </>
  );
}

function useStableSize(size: PhotoSize | null): PhotoSize | null {
  const width = size?.width;
  const height = size?.height;
  return useMemo(() => (width === undefined || height === undefined ? null : { width, height }), [width, height]);
}

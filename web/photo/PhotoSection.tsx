import { useState } from 'react';
import type { Photo } from '../../src/records/laboratoryRecords.ts';
import type { Reading } from '../../src/records/reading.ts';
import { asProblem } from '../api/http.ts';
import { addReading } from '../api/laboratory.ts';
import type { Problem } from '../api/problem.ts';
import type { SheetWithoutTest } from '../api/types.ts';
import { DropZone } from '../parts/DropZone.tsx';
import { ProblemNote } from '../parts/ProblemNote.tsx';
import { CORRECTION, PHOTO } from '../texts/photo.ts';
import { CorrectionPanel } from './CorrectionPanel.tsx';
import { PhotoPanel } from './PhotoPanel.tsx';
import { pointPxOf, startOfCorrection } from './sceneOfReading.ts';
import { UploadBar } from './UploadBar.tsx';
import type { CorrectionControl, OpenCorrection } from './useCorrection.ts';
import { usePhotoUpload } from './usePhotoUpload.ts';

interface PhotoSectionProps {
  readonly testId: string;
  readonly photos: readonly Photo[];
  readonly readings: readonly Reading[];
  readonly governingId: string | null;
  readonly correction: CorrectionControl;
  readonly onAnswer: (answer: SheetWithoutTest) => void;
  /** After a reading by hand is stored. */
  readonly onSaved: (message: string) => Promise<void>;
}

/** The photos of a test: looking, adding, correcting. Photos can be dropped anywhere on it. */
export function PhotoSection(props: PhotoSectionProps) {
  const { testId, photos, readings, governingId, correction, onAnswer, onSaved } = props;
  const [chosen, setChosen] = useState<string | null>(null);
  const [saving, setSaving] = useState(false);
  const [problem, setProblem] = useState<Problem | null>(null);
  const upload = usePhotoUpload(testId, (answer) => {
    const known = new Set(photos.map(({ sha256 }) => sha256));
    const added = answer.photos.find(({ sha256 }) => !known.has(sha256));
    if (added) setChosen(added.sha256);
    onAnswer(answer);
  });

  const governing = readings.find(({ id }) => id === governingId)?.photoSha256;
  const selected =
    photos.find(({ sha256 }) => sha256 === chosen) ?? photos.find(({ sha256 }) => sha256 === governing) ?? photos[0];

  const save = async (open: OpenCorrection, by: { readonly operator: string; readonly remarks: string }) => {
    const { scene } = open.correction;
    setSaving(true);
    setProblem(null);
    try {
      await addReading(testId, {
        method: 'photo-hand',
        photoSha256: open.sha256,
        axisPx: [pointPxOf(scene.axis.a), pointPxOf(scene.axis.b)],
        diameterPx: scene.diameterPx,
        tracePx: scene.trace.map(pointPxOf),
        ...(by.operator.trim() === '' ? {} : { operator: by.operator.trim() }),
        ...(by.remarks.trim() === '' ? {} : { remarks: by.remarks.trim() }),
      });
      await onSaved(CORRECTION.saved);
      correction.close();
    } catch (error) {
      setProblem(asProblem(error));
    } finally {
      setSaving(false);
    }
  };

  const { open } = correction;
  if (open !== null) {
    const fileName = photos.find(({ sha256 }) => sha256 === open.sha256)?.fileName ?? '';
    return (
      <section className="panel photo-section" aria-labelledby="photo-title">
        <h2 id="photo-title">{CORRECTION.title}</h2>
        {open.result.refusal !== null && <p className="note note-warning">{open.result.refusal}</p>}
        {problem !== null && <ProblemNote problem={problem} />}
        <CorrectionPanel
          sha256={open.sha256}
          fileName={fileName}
          correction={open.correction}
          result={open.result}
          start={open.start}
          saving={saving}
          act={correction.act}
          onSave={(by) => void save(open, by)}
          onLeave={correction.close}
        />
      </section>
    );
  }

  return (
    <DropZone label={PHOTO.title} className="panel photo-section" onFiles={upload.send}>
      <h2>{PHOTO.title}</h2>
      {selected !== undefined && (
        <PhotoPanel
          photos={photos}
          readings={readings}
          governingId={governingId}
          selected={selected}
          busy={upload.state.phase !== 'rest'}
          onSelect={setChosen}
          onCorrect={(from, size) => correction.begin(selected.sha256, startOfCorrection(from, size), size)}
          onMeasureAgain={() => upload.again(selected.sha256)}
        />
      )}
      <UploadBar upload={upload} first={selected === undefined} />
    </DropZone>
  );
}

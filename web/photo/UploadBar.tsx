import { FilePicker } from '../parts/FilePicker.tsx';
import { ProblemNote } from '../parts/ProblemNote.tsx';
import { Link } from '../routing/Link.tsx';
import { PHOTO } from '../texts/photo.ts';
import type { PhotoUpload } from './usePhotoUpload.ts';

const ACCEPTED = 'image/jpeg,image/png,image/webp,image/tiff,image/heic,image/heif,.heic,.heif,.tif,.tiff';

/** Adding photos by file or camera, and how far that is. */
export function UploadBar({ upload, first }: { readonly upload: PhotoUpload; readonly first: boolean }) {
  const { state, problem, send } = upload;
  const busy = state.phase !== 'rest';
  return (
    <div className="upload-bar">
      {first && (
        <>
          <p className="drop-title">{PHOTO.dropHere}</p>
          <p className="drop-detail">{PHOTO.dropDetail}</p>
        </>
      )}
      <div className="upload-buttons">
        <FilePicker
          label={PHOTO.add}
          accept={ACCEPTED}
          multiple
          disabled={busy}
          onFiles={send}
          className={first ? 'primary' : ''}
        />
        <FilePicker label={PHOTO.take} accept="image/*" camera disabled={busy} onFiles={send} />
        <Link to={{ place: 'photo-help' }}>{PHOTO.howTo}</Link>
      </div>
      {busy && (
        <div className="progress" role="status">
          <progress aria-label={PHOTO.title} {...(state.phase === 'sending' ? { value: state.share, max: 1 } : {})} />
          <span>{state.phase === 'sending' ? PHOTO.sending(Math.round(state.share * 100)) : PHOTO.measuring}</span>
        </div>
      )}
      {problem !== null && <ProblemNote problem={problem} />}
    </div>
  );
}

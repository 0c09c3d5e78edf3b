import type { PhotoNotMeasured } from '../../src/records/reading.ts';
import { Link } from '../routing/Link.tsx';
import { PHOTO, WHAT_TO_DO } from '../texts/photo.ts';

/** Why a photo gave no angle, and what to do about it. */
export function NotMeasured({ reason }: { readonly reason: PhotoNotMeasured['reason'] }) {
  return (
    <div className="note note-warning">
      <p>
        <strong>{PHOTO.notMeasured}.</strong> {reason.message}
      </p>
      <p>{WHAT_TO_DO[reason.code]}</p>
      <p>
        <Link to={{ place: 'photo-help' }}>{PHOTO.howTo}</Link>
      </p>
    </div>
  );
}

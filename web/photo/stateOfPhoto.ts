import type { Photo } from '../../src/records/laboratoryRecords.ts';
import type { Reading } from '../../src/records/reading.ts';
import type { PhotoSize } from './traceScene.ts';

/** Readings made on a photo, oldest first, those set aside included. */
export const readingsOnPhoto = (photo: Photo, readings: readonly Reading[]): readonly Reading[] =>
  readings
    .filter((reading) => reading.photoSha256 === photo.sha256)
    .sort((a, b) => (a.createdAt < b.createdAt ? -1 : a.createdAt > b.createdAt ? 1 : 0));

/** Size of the upright photo, px: what a reading was made on, else what the store knows; null when nobody could read it. */
export function uprightSize(photo: Photo, readings: readonly Reading[]): PhotoSize | null {
  for (const { result } of readings) {
    if (result.outcome === 'by-instrument') continue;
    if (result.widthPx !== undefined && result.heightPx !== undefined)
      return { width: result.widthPx, height: result.heightPx };
  }
  return photo.widthPx !== null && photo.heightPx !== null ? { width: photo.widthPx, height: photo.heightPx } : null;
}

/** The reading a photo shows unless somebody chooses another: the one the statement rests on, else the newest in use. */
export function readingToShow(onPhoto: readonly Reading[], governingId: string | null): Reading | null {
  const inUse = onPhoto.filter((reading) => !reading.setAside);
  return (
    inUse.find((reading) => reading.id === governingId) ??
    inUse.filter((reading) => reading.result.outcome === 'measured').at(-1) ??
    inUse.at(-1) ??
    onPhoto.at(-1) ??
    null
  );
}

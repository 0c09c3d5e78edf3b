import type { MeasureOptions } from '../../../src/photo/measurement.ts';
import type { PhotoMeasurement } from '../../../src/records/reading.ts';

export type MeasurePhoto = (bytes: Uint8Array, options?: MeasureOptions) => Promise<PhotoMeasurement>;

/** The measurement, loaded only when a bench needs it, so that the other benches run without its libraries. */
export async function loadMeasurePhoto(): Promise<MeasurePhoto> {
  const place = '../../../src/photo/node/measurePhoto.ts';
  const module = (await import(place)) as { readonly measurePhoto: MeasurePhoto };
  return module.measurePhoto;
}

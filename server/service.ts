import type { MeasurePool } from '../src/photo/measurement.ts';
import type { UploadLimits } from './http/uploads.ts';
import type { MeasuringRunner } from './measure/measuringRunner.ts';
import type { UprightPhotos } from './photos/uprightPhotos.ts';
import type { Sheet } from './routes/sheet.ts';
import type { LaboratoryStore } from './store/laboratoryStore.ts';

/**
 * Makes the PDF report of one test.
 * @param photoPath where the bytes of a photo lie
 */
export type ReportRenderer = (sheet: Sheet, photoPath: (sha256: string) => Promise<string>) => Promise<Uint8Array>;

/** What the routes work with. */
export interface Service {
  readonly store: LaboratoryStore;
  readonly pool: MeasurePool;
  readonly measuring: MeasuringRunner;
  readonly upright: UprightPhotos;
  /** Null when the program has no reports. */
  readonly report: ReportRenderer | null;
  readonly limits: ServiceLimits;
  /** Folder of the program, where samples/ and dist/web lie. */
  readonly programDir: string;
  readonly version: string;
}

export interface ServiceLimits {
  readonly photos: UploadLimits;
  readonly logs: UploadLimits;
  /** Largest JSON body, bytes. */
  readonly bodyBytes: number;
}

const MB = 1024 * 1024;

export const DEFAULT_LIMITS: ServiceLimits = {
  photos: { fileBytes: 200 * MB, files: 50, requestBytes: 1024 * MB },
  logs: { fileBytes: 4096 * MB, files: 5000, requestBytes: 8192 * MB },
  bodyBytes: 1 * MB,
};

import type { PhotoMeasurement, PointPx } from '../records/reading.ts';

/** Name and version of the measuring engine; stored with every reading it makes. */
export const ENGINE_VERSION = 'trace-1';

export interface MeasureOptions {
  /** Diameter of the specimen, mm, where known: turns px into mm in the overlay; the angle does not need it. */
  readonly diameterMm?: number;
  /** Standard uncertainty of the camera's tilt out of square, degrees; default 1.5 (±3°, k = 2). */
  readonly cameraTiltStandardUncertaintyDeg?: number;
  /** By hand: the two ends of the axis and the points of the trace, px of the upright photo. */
  readonly byHand?: {
    readonly axisPx: readonly [PointPx, PointPx];
    readonly diameterPx: number;
    readonly tracePx: readonly PointPx[];
  };
  /** Receives the stages as pictures (PNG bytes), for `--debug`. */
  readonly onStage?: (name: string, png: Uint8Array) => void;
}

/** A request to the measuring workers. Bytes are read in the worker from `path`. */
export interface MeasureJob {
  readonly path: string;
  readonly options?: Omit<MeasureOptions, 'onStage'> & { readonly debugDirectory?: string };
}

/** Measures photos away from the calling thread. */
export interface MeasurePool {
  /** Never rejects for a bad photo: that is `not-measured`. */
  measure(job: MeasureJob): Promise<PhotoMeasurement>;
  close(): Promise<void>;
}

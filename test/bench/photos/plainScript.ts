import { createRequire } from 'node:module';
import { performance } from 'node:perf_hooks';
import sharp from 'sharp';
import { planeAngleDistanceDeg, radToDeg, wrapPlaneAngleDeg } from '../../../src/angle.ts';
import type { PhotoMeasurement } from '../../../src/records/reading.ts';

/** The part of OpenCV this reference run uses. */
interface Matrix {
  readonly data32S: Int32Array;
  readonly rows: number;
  delete(): void;
}
interface OpenCv {
  readonly CV_8UC1: number;
  readonly Mat: new () => Matrix;
  readonly Size: new (width: number, height: number) => unknown;
  matFromArray(rows: number, columns: number, type: number, values: Uint8Array): Matrix;
  GaussianBlur(from: Matrix, to: Matrix, size: unknown, sigma: number): void;
  Canny(from: Matrix, to: Matrix, low: number, high: number): void;
  HoughLinesP(from: Matrix, to: Matrix, rho: number, theta: number, votes: number, length: number, gap: number): void;
}

let loaded: OpenCv | undefined;
function openCv(): OpenCv {
  if (loaded) return loaded;
  // The package answers every later fault with process.exit unless its two listeners go again.
  const before = new Set([...process.listeners('uncaughtException'), ...process.listeners('unhandledRejection')]);
  const { cv } = createRequire(import.meta.url)('opencv-wasm') as { cv: OpenCv };
  for (const event of ['uncaughtException', 'unhandledRejection']) {
    for (const listener of process.listeners(event as 'uncaughtException')) {
      if (!before.has(listener)) process.removeListener(event, listener);
    }
  }
  loaded = cv;
  return cv;
}

interface Direction {
  /** Direction of the line, degrees, y up, [0, 180). */
  readonly deg: number;
  readonly lengthPx: number;
}

const WORKING_WIDTH_PX = 1000;
/** Lines nearer than this belong to the same direction. */
const SAME_DIRECTION_DEG = 5;

/**
 * What a usual script does, for comparison only: Canny edges, probabilistic Hough lines, longest direction =
 * axis, next longest direction = break. No unrolling, no uncertainty, no refusal but "fewer than two directions".
 */
export async function measureByPlainScript(bytes: Uint8Array): Promise<PhotoMeasurement> {
  const started = performance.now();
  const { data, info } = await sharp(bytes)
    .autoOrient()
    .resize({ width: WORKING_WIDTH_PX, height: WORKING_WIDTH_PX, fit: 'inside', withoutEnlargement: true })
    .greyscale()
    .raw()
    .toBuffer({ resolveWithObject: true });
  const [axis, fracture] = mainDirections(houghSegments(data, info.height, info.width));
  const common = { sha256: '', elapsedMs: performance.now() - started, warnings: [] };
  if (!axis || !fracture) {
    return {
      outcome: 'not-measured',
      reason: { code: 'no-fracture', message: 'fewer than two directions' },
      ...common,
    };
  }
  const planeAngleDeg = wrapPlaneAngleDeg(90 - (fracture.deg - axis.deg));
  return {
    outcome: 'measured',
    planeAngleDeg,
    expandedUncertaintyDeg: 0,
    coverageFactor: 2,
    hand: planeAngleDeg > 0 ? 'left' : 'right',
    shape: Math.abs(planeAngleDeg) > 67.5 ? 'longitudinal' : 'helix',
    planeTiltDeg: null,
    segments: [{ planeAngleDeg, share: 1 }],
    axisPx: [
      [0, 0],
      [1, 0],
    ],
    diameterPx: 1,
    tracePx: [],
    widthPx: info.width,
    heightPx: info.height,
    ...common,
  };
}

function houghSegments(grey: Uint8Array, rows: number, columns: number): Direction[] {
  const cv = openCv();
  const picture = cv.matFromArray(rows, columns, cv.CV_8UC1, grey);
  const smooth = new cv.Mat();
  const edges = new cv.Mat();
  const lines = new cv.Mat();
  try {
    cv.GaussianBlur(picture, smooth, new cv.Size(5, 5), 0);
    cv.Canny(smooth, edges, 50, 150);
    cv.HoughLinesP(edges, lines, 1, Math.PI / 180, 30, 20, 5);
    return Array.from({ length: lines.rows }, (_, i) => {
      const [x1 = 0, y1 = 0, x2 = 0, y2 = 0] = lines.data32S.subarray(4 * i, 4 * i + 4);
      const deg = radToDeg(Math.atan2(y1 - y2, x2 - x1));
      return { deg: ((deg % 180) + 180) % 180, lengthPx: Math.hypot(x2 - x1, y2 - y1) };
    });
  } finally {
    for (const matrix of [picture, smooth, edges, lines]) matrix.delete();
  }
}

/** Directions by total length, longest first, each at least 10° from the ones before. */
function mainDirections(segments: readonly Direction[]): Direction[] {
  const candidates = segments
    .map(({ deg }) => ({
      deg,
      lengthPx: segments
        .filter((other) => planeAngleDistanceDeg(other.deg, deg) < SAME_DIRECTION_DEG)
        .reduce((sum, other) => sum + other.lengthPx, 0),
    }))
    .sort((a, b) => b.lengthPx - a.lengthPx);
  const main: Direction[] = [];
  for (const candidate of candidates) {
    if (main.every((chosen) => planeAngleDistanceDeg(chosen.deg, candidate.deg) > 2 * SAME_DIRECTION_DEG))
      main.push(candidate);
  }
  return main;
}

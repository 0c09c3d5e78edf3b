import type { PhotoPoint } from '../../src/photo/unroll.ts';
import type { PointPx, Reading } from '../../src/records/reading.ts';
import { betweenPoints, type PhotoSize, type TraceScene } from './traceScene.ts';

/** As many trace points as a hand can take hold of. */
const HAND_TRACE_POINTS = 11;

export const photoPointOf = ([xPx, yPx]: PointPx): PhotoPoint => ({ xPx, yPx });
export const pointPxOf = ({ xPx, yPx }: PhotoPoint): PointPx => [xPx, yPx];

/** The scene a stored reading left on its photo; null when it left none. */
export function sceneOfReading(reading: Reading): TraceScene | null {
  if (reading.result.outcome !== 'measured') return null;
  const { axisPx, diameterPx, tracePx } = reading.result;
  return {
    axis: { a: photoPointOf(axisPx[0]), b: photoPointOf(axisPx[1]) },
    diameterPx,
    trace: tracePx.map(photoPointOf),
  };
}

/** Where a correction by hand starts: from the reading where there is one, else a bar across the middle of the photo. */
export function startOfCorrection(reading: Reading | null, photo: PhotoSize): TraceScene {
  const measured = reading === null ? null : sceneOfReading(reading);
  if (measured !== null) return { ...measured, trace: evenPoints(measured.trace, HAND_TRACE_POINTS) };
  const result = reading?.result;
  if (result?.outcome === 'not-measured' && result.axisPx && result.diameterPx !== undefined) {
    const axis = { a: photoPointOf(result.axisPx[0]), b: photoPointOf(result.axisPx[1]) };
    return straightAcross({ axis, diameterPx: result.diameterPx, trace: [] });
  }
  const middle = photo.height / 2;
  return straightAcross({
    axis: { a: { xPx: photo.width * 0.2, yPx: middle }, b: { xPx: photo.width * 0.8, yPx: middle } },
    diameterPx: Math.min(photo.width, photo.height) / 4,
    trace: [],
  });
}

/** A trace square to the axis at its middle, to be dragged into place. */
function straightAcross(scene: TraceScene): TraceScene {
  const { a, b } = scene.axis;
  const middle = betweenPoints(a, b, 0.5);
  const length = Math.hypot(b.xPx - a.xPx, b.yPx - a.yPx) || 1;
  const across = { x: (b.yPx - a.yPx) / length, y: -(b.xPx - a.xPx) / length };
  const offsets = [-0.42, -0.21, 0, 0.21, 0.42].map((share) => share * scene.diameterPx);
  return {
    ...scene,
    trace: offsets.map((offset) => ({ xPx: middle.xPx + across.x * offset, yPx: middle.yPx + across.y * offset })),
  };
}

/** `count` points at even distances along a polyline, ends included. A shorter polyline comes back as it is. */
export function evenPoints(points: readonly PhotoPoint[], count: number): readonly PhotoPoint[] {
  const first = points[0];
  if (points.length <= count || first === undefined) return points;
  const lengthTo: number[] = [0];
  for (let index = 1; index < points.length; index += 1) {
    const before = points[index - 1] ?? first;
    const here = points[index] ?? first;
    lengthTo.push((lengthTo[index - 1] ?? 0) + Math.hypot(here.xPx - before.xPx, here.yPx - before.yPx));
  }
  const whole = lengthTo.at(-1) ?? 0;
  let segment = 1;
  return Array.from({ length: count }, (_, step) => {
    const wanted = (whole * step) / (count - 1);
    while (segment < points.length - 1 && (lengthTo[segment] ?? 0) < wanted) segment += 1;
    const from = lengthTo[segment - 1] ?? 0;
    const to = lengthTo[segment] ?? whole;
    return betweenPoints(
      points[segment - 1] ?? first,
      points[segment] ?? first,
      to > from ? (wanted - from) / (to - from) : 0,
    );
  });
}

import type { PhotoPoint } from '../../src/photo/unroll.ts';

/** What lies on the photo: axis, diameter and fracture trace, all in px of the upright photo. Data only. */
export interface TraceScene {
  readonly axis: { readonly a: PhotoPoint; readonly b: PhotoPoint };
  readonly diameterPx: number;
  readonly trace: readonly PhotoPoint[];
}

/** Something that can be taken hold of. */
export type Handle =
  | { readonly kind: 'axis-end'; readonly end: 'a' | 'b' }
  | { readonly kind: 'axis' }
  | { readonly kind: 'edge'; readonly side: 'upper' | 'lower' }
  | { readonly kind: 'trace'; readonly index: number };

export interface PhotoSize {
  readonly width: number;
  readonly height: number;
}

export const SMALLEST_DIAMETER_PX = 5;
/** A trace needs this many points to have a direction and a check on it. */
export const FEWEST_TRACE_POINTS = 3;

export const handleKey = (handle: Handle): string =>
  handle.kind === 'trace'
    ? `trace-${handle.index}`
    : handle.kind === 'axis-end'
      ? `axis-${handle.end}`
      : handle.kind === 'edge'
        ? `edge-${handle.side}`
        : 'axis';

/** Every handle of a scene, trace points last, in the order the keyboard visits them. */
export const handlesOf = (scene: TraceScene): readonly Handle[] => [
  { kind: 'axis-end', end: 'a' },
  { kind: 'axis' },
  { kind: 'axis-end', end: 'b' },
  { kind: 'edge', side: 'upper' },
  { kind: 'edge', side: 'lower' },
  ...scene.trace.map((_, index): Handle => ({ kind: 'trace', index })),
];

/** Unit vector along the axis, and square to it; a zero-length axis counts as horizontal. */
export function axisDirection({ axis }: TraceScene): { readonly alongX: number; readonly alongY: number } {
  const dx = axis.b.xPx - axis.a.xPx;
  const dy = axis.b.yPx - axis.a.yPx;
  const length = Math.hypot(dx, dy);
  return length > 0 ? { alongX: dx / length, alongY: dy / length } : { alongX: 1, alongY: 0 };
}

export const middleOfAxis = ({ axis }: TraceScene): PhotoPoint => ({
  xPx: (axis.a.xPx + axis.b.xPx) / 2,
  yPx: (axis.a.yPx + axis.b.yPx) / 2,
});

/** Where a handle is, or undefined for a trace point that does not exist. */
export function handlePosition(scene: TraceScene, handle: Handle): PhotoPoint | undefined {
  switch (handle.kind) {
    case 'axis-end':
      return scene.axis[handle.end];
    case 'axis':
      return middleOfAxis(scene);
    case 'edge': {
      const { alongX, alongY } = axisDirection(scene);
      const offset = (handle.side === 'upper' ? 1 : -1) * (scene.diameterPx / 2);
      // A quarter of the way along, so that it does not hide the trace in the middle.
      const from = betweenPoints(scene.axis.a, scene.axis.b, 0.25);
      return { xPx: from.xPx + alongY * offset, yPx: from.yPx - alongX * offset };
    }
    case 'trace':
      return scene.trace[handle.index];
  }
}

/** The scene with a handle moved to a photo point, kept inside the photo. */
export function moveHandle(scene: TraceScene, handle: Handle, to: PhotoPoint, photo: PhotoSize): TraceScene {
  const at = insidePhoto(to, photo);
  switch (handle.kind) {
    case 'axis-end': {
      const axis = { ...scene.axis, [handle.end]: at };
      return Math.hypot(axis.b.xPx - axis.a.xPx, axis.b.yPx - axis.a.yPx) < 1 ? scene : { ...scene, axis };
    }
    case 'axis': {
      const middle = middleOfAxis(scene);
      const moved = (end: PhotoPoint) => ({ xPx: end.xPx + at.xPx - middle.xPx, yPx: end.yPx + at.yPx - middle.yPx });
      return { ...scene, axis: { a: moved(scene.axis.a), b: moved(scene.axis.b) } };
    }
    case 'edge':
      return withDiameter(scene, 2 * distanceFromAxisPx(scene, at));
    case 'trace':
      return { ...scene, trace: scene.trace.map((point, index) => (index === handle.index ? at : point)) };
  }
}

export const withDiameter = (scene: TraceScene, diameterPx: number): TraceScene =>
  diameterPx >= SMALLEST_DIAMETER_PX ? { ...scene, diameterPx } : scene;

export function distanceFromAxisPx(scene: TraceScene, point: PhotoPoint): number {
  const { alongX, alongY } = axisDirection(scene);
  return Math.abs((point.xPx - scene.axis.a.xPx) * alongY - (point.yPx - scene.axis.a.yPx) * alongX);
}

/** Adds a trace point where it lengthens the trace least; returns its handle. */
export function addTracePoint(
  scene: TraceScene,
  at: PhotoPoint,
  photo: PhotoSize,
): { scene: TraceScene; handle: Handle } {
  const point = insidePhoto(at, photo);
  const { trace } = scene;
  let best = { index: trace.length, detourPx: Number.POSITIVE_INFINITY };
  for (let index = 0; index <= trace.length; index += 1) {
    const before = trace[index - 1];
    const after = trace[index];
    const detourPx = distancePx(before, point) + distancePx(point, after) - distancePx(before, after);
    if (detourPx < best.detourPx) best = { index, detourPx };
  }
  return {
    scene: { ...scene, trace: [...trace.slice(0, best.index), point, ...trace.slice(best.index)] },
    handle: { kind: 'trace', index: best.index },
  };
}

/** Takes a trace point away, unless too few would be left. */
export const removeTracePoint = (scene: TraceScene, index: number): TraceScene =>
  scene.trace.length <= FEWEST_TRACE_POINTS
    ? scene
    : { ...scene, trace: scene.trace.filter((_, candidate) => candidate !== index) };

/** A missing neighbour is at no distance: ends grow freely. */
function distancePx(from: PhotoPoint | undefined, to: PhotoPoint | undefined): number {
  return from && to ? Math.hypot(to.xPx - from.xPx, to.yPx - from.yPx) : 0;
}

export const betweenPoints = (from: PhotoPoint, to: PhotoPoint, share: number): PhotoPoint => ({
  xPx: from.xPx + (to.xPx - from.xPx) * share,
  yPx: from.yPx + (to.yPx - from.yPx) * share,
});

const insidePhoto = (point: PhotoPoint, photo: PhotoSize): PhotoPoint => ({
  xPx: Math.min(Math.max(point.xPx, -0.5), photo.width - 0.5),
  yPx: Math.min(Math.max(point.yPx, -0.5), photo.height - 0.5),
});

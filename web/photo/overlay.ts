import type { PhotoPoint } from '../../src/photo/unroll.ts';
import { axisDirection, type TraceScene } from './traceScene.ts';
import { type StagePoint, toStage, type Viewport } from './viewport.ts';

/** A line to be drawn over the photo. Its looks are in styles/photo.css under `mark-…`. */
export interface Mark {
  readonly name: 'axis' | 'edge' | 'trace' | 'fit';
  readonly points: readonly StagePoint[];
}

/** Axis and edges are drawn on beyond the axis ends by this share of the diameter, so that they read as lines. */
const OVERSHOOT_OF_DIAMETER = 0.4;

/**
 * The lines of a scene in stage coordinates: the scene is data, this is its drawing.
 * @param fit points of the fitted curve, px of the upright photo; empty when there is none
 */
export function overlayMarks(scene: TraceScene, fit: readonly PhotoPoint[], viewport: Viewport): readonly Mark[] {
  const { alongX, alongY } = axisDirection(scene);
  const beyond = scene.diameterPx * OVERSHOOT_OF_DIAMETER;
  const parallel = (offset: number): readonly StagePoint[] => {
    const { a, b } = scene.axis;
    return [
      { xPx: a.xPx - alongX * beyond + alongY * offset, yPx: a.yPx - alongY * beyond - alongX * offset },
      { xPx: b.xPx + alongX * beyond + alongY * offset, yPx: b.yPx + alongY * beyond - alongX * offset },
    ].map((point) => toStage(viewport, point));
  };
  const line = (points: readonly PhotoPoint[]) => points.map((point) => toStage(viewport, point));
  const marks: Mark[] = [
    { name: 'edge', points: parallel(scene.diameterPx / 2) },
    { name: 'edge', points: parallel(-scene.diameterPx / 2) },
    { name: 'axis', points: parallel(0) },
    { name: 'trace', points: line(scene.trace) },
  ];
  if (fit.length > 1) marks.push({ name: 'fit', points: line(fit) });
  return marks;
}

/** Points as the `d` of an SVG path, rounded to a hundredth of a CSS px. */
export const pathData = (points: readonly StagePoint[]): string =>
  points.map(({ x, y }, index) => `${index === 0 ? 'M' : 'L'}${x.toFixed(2)} ${y.toFixed(2)}`).join('');

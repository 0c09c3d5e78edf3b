import type { PointPx } from '../records/reading.ts';
import { element, px } from './svgText.ts';

/** What is drawn over a photo; px of the upright photo at full resolution. */
export interface OverlayScene {
  readonly axisPx?: readonly [PointPx, PointPx] | undefined;
  readonly diameterPx?: number | undefined;
  readonly edgesPx?: readonly (readonly [PointPx, PointPx])[] | undefined;
  readonly tracePx?: readonly PointPx[] | undefined;
}

/** A rectangle of the photo that a document shows, px of the full photo. */
export interface PhotoWindow {
  readonly leftPx: number;
  readonly topPx: number;
  readonly widthPx: number;
  readonly heightPx: number;
}

/** The part of a photo worth printing: the break with some diameters on each side, in the shape of the frame. */
export function windowAroundBreak(
  scene: OverlayScene,
  photo: { readonly widthPx: number; readonly heightPx: number },
  aspect: number,
): PhotoWindow {
  const whole = { leftPx: 0, topPx: 0, widthPx: photo.widthPx, heightPx: photo.heightPx };
  const points = scene.tracePx ?? scene.axisPx ?? [];
  if (points.length === 0) return whole;
  const xs = points.map((p) => p[0]);
  const ys = points.map((p) => p[1]);
  const margin = 1.6 * (scene.diameterPx ?? 0.1 * photo.widthPx);
  let width = Math.max(...xs) - Math.min(...xs) + 2 * margin;
  let height = Math.max(...ys) - Math.min(...ys) + 2 * margin;
  if (width / height < aspect) width = height * aspect;
  else height = width / aspect;
  const scale = Math.min(1, photo.widthPx / width, photo.heightPx / height);
  width *= scale;
  height *= scale;
  const cx = (Math.max(...xs) + Math.min(...xs)) / 2;
  const cy = (Math.max(...ys) + Math.min(...ys)) / 2;
  return {
    leftPx: Math.round(Math.max(0, Math.min(photo.widthPx - width, cx - width / 2))),
    topPx: Math.round(Math.max(0, Math.min(photo.heightPx - height, cy - height / 2))),
    widthPx: Math.floor(width),
    heightPx: Math.floor(height),
  };
}

/** SVG of the same size as the picture of `window`, `scale` picture px per photo px, to be laid over it. */
export function photoOverlay(scene: OverlayScene, window: PhotoWindow, scale: number): string {
  const width = window.widthPx * scale;
  const height = window.heightPx * scale;
  const at = (p: PointPx) => `${px((p[0] + 0.5 - window.leftPx) * scale)} ${px((p[1] + 0.5 - window.topPx) * scale)}`;
  const path = (points: readonly PointPx[]) => points.map((p, i) => `${i === 0 ? 'M' : 'L'}${at(p)}`).join('');
  const thick = Math.max(1.2, width / 420);
  const strokes: [string, string, string][] = [];
  for (const edge of scene.edgesPx ?? []) strokes.push([path(edge), '#8fd3ff', '']);
  if (scene.axisPx)
    strokes.push([path(scene.axisPx), '#ffffff', `${px(thick * 6)} ${px(thick * 2)} ${px(thick)} ${px(thick * 2)}`]);
  if (scene.tracePx) strokes.push([path(scene.tracePx), '#ff9d3c', '']);
  const casings = strokes.map(([d]) =>
    element('path', { d, fill: 'none', stroke: '#0a1018', 'stroke-opacity': '0.6', 'stroke-width': thick * 2.4 }),
  );
  const lines = strokes.map(([d, stroke, dash]) =>
    element('path', {
      d,
      fill: 'none',
      stroke,
      'stroke-width': thick * 1.2,
      ...(dash === '' ? {} : { 'stroke-dasharray': dash }),
    }),
  );
  return element(
    'svg',
    { xmlns: 'http://www.w3.org/2000/svg', viewBox: `0 0 ${px(width)} ${px(height)}`, width, height },
    [...casings, ...lines].join(''),
  );
}

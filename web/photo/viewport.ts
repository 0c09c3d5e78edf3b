import type { PhotoPoint } from '../../src/photo/unroll.ts';

/** Where the photo lies on the stage: the only place that knows zoom and pan. Stage points are CSS px from its corner. */
export interface Viewport {
  /** CSS px per photo px, > 0. */
  readonly scale: number;
  /** Stage position of the photo point (0, 0), CSS px. */
  readonly leftPx: number;
  readonly topPx: number;
}

export interface StagePoint {
  readonly x: number;
  readonly y: number;
}

export interface Size {
  readonly width: number;
  readonly height: number;
}

/** Largest magnification: one photo pixel as large as this many CSS px. */
const LARGEST_SCALE = 24;
/** The photo can be shrunk to this share of its fitted size, not further. */
const SMALLEST_OF_FIT = 0.8;

export const toStage = (viewport: Viewport, point: PhotoPoint): StagePoint => ({
  x: viewport.leftPx + point.xPx * viewport.scale,
  y: viewport.topPx + point.yPx * viewport.scale,
});

export const toPhotoPoint = (viewport: Viewport, point: StagePoint): PhotoPoint => ({
  xPx: (point.x - viewport.leftPx) / viewport.scale,
  yPx: (point.y - viewport.topPx) / viewport.scale,
});

/** The whole photo, centred. Pixel centres are integers, so the photo reaches from −0.5 to width − 0.5. */
export function fitPhoto(photo: Size, stage: Size): Viewport {
  return fitBox({ left: -0.5, top: -0.5, right: photo.width - 0.5, bottom: photo.height - 0.5 }, stage);
}

export interface Box {
  readonly left: number;
  readonly top: number;
  readonly right: number;
  readonly bottom: number;
}

/** A part of the photo (photo px), as large as the stage allows, centred. */
export function fitBox(box: Box, stage: Size): Viewport {
  const width = Math.max(box.right - box.left, 1);
  const height = Math.max(box.bottom - box.top, 1);
  const scale = Math.min(LARGEST_SCALE, Math.max(1e-6, Math.min(stage.width / width, stage.height / height)));
  return {
    scale,
    leftPx: stage.width / 2 - ((box.left + box.right) / 2) * scale,
    topPx: stage.height / 2 - ((box.top + box.bottom) / 2) * scale,
  };
}

/** Smallest box around points, with a margin in photo px, kept inside the photo. */
export function boxAround(points: readonly PhotoPoint[], marginPx: number, photo: Size): Box {
  const xs = points.map((point) => point.xPx);
  const ys = points.map((point) => point.yPx);
  return {
    left: Math.max(-0.5, Math.min(...xs) - marginPx),
    top: Math.max(-0.5, Math.min(...ys) - marginPx),
    right: Math.min(photo.width - 0.5, Math.max(...xs) + marginPx),
    bottom: Math.min(photo.height - 0.5, Math.max(...ys) + marginPx),
  };
}

/** Zooms by a factor; the photo point under `at` stays under it. */
export function zoomAt(viewport: Viewport, factor: number, at: StagePoint, photo: Size, stage: Size): Viewport {
  const smallest = fitPhoto(photo, stage).scale * SMALLEST_OF_FIT;
  const scale = Math.min(LARGEST_SCALE, Math.max(smallest, viewport.scale * factor));
  const held = toPhotoPoint(viewport, at);
  return keepInReach({ scale, leftPx: at.x - held.xPx * scale, topPx: at.y - held.yPx * scale }, photo, stage);
}

export const panBy = (viewport: Viewport, dx: number, dy: number, photo: Size, stage: Size): Viewport =>
  keepInReach({ ...viewport, leftPx: viewport.leftPx + dx, topPx: viewport.topPx + dy }, photo, stage);

/** The middle of the stage always shows some of the photo. */
function keepInReach(viewport: Viewport, photo: Size, stage: Size): Viewport {
  const between = (value: number, low: number, high: number) => Math.min(Math.max(value, low), high);
  return {
    scale: viewport.scale,
    leftPx: between(viewport.leftPx, stage.width / 2 - photo.width * viewport.scale, stage.width / 2),
    topPx: between(viewport.topPx, stage.height / 2 - photo.height * viewport.scale, stage.height / 2),
  };
}

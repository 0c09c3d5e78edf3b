import { LabError } from '../../src/errors.ts';
import { type ByHandMeasurement, measureByHand } from '../../src/photo/byHand.ts';
import { pointPxOf } from './sceneOfReading.ts';
import type { PhotoSize, TraceScene } from './traceScene.ts';

/** What a trace set by hand says, or why it says nothing. */
export type HandResult =
  | { readonly measured: ByHandMeasurement; readonly refusal: null }
  | { readonly measured: null; readonly refusal: string };

/** Measures a scene in the page, by the same functions the service will use when it is saved. */
export function measureScene(scene: TraceScene, photo: PhotoSize): HandResult {
  try {
    const measured = measureByHand({
      axisPx: [pointPxOf(scene.axis.a), pointPxOf(scene.axis.b)],
      diameterPx: scene.diameterPx,
      tracePx: scene.trace.map(pointPxOf),
      widthPx: photo.width,
      heightPx: photo.height,
    });
    return { measured, refusal: null };
  } catch (error) {
    if (error instanceof LabError) return { measured: null, refusal: error.message };
    throw error;
  }
}

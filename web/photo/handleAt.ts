import { type Handle, handlePosition, handlesOf, type TraceScene } from './traceScene.ts';
import { type StagePoint, toStage, type Viewport } from './viewport.ts';

/** How far from a handle it can still be taken, CSS px: a fingertip needs more than a mouse. */
export const REACH_PX = { mouse: 12, pen: 16, touch: 26 } as const;

/** The handle nearest to a stage point, within reach; of two as near, a trace point. */
export function handleAt(scene: TraceScene, viewport: Viewport, at: StagePoint, reachPx: number): Handle | null {
  let nearest: { handle: Handle; distance: number } | null = null;
  for (const handle of handlesOf(scene)) {
    const position = handlePosition(scene, handle);
    if (position === undefined) continue;
    const stage = toStage(viewport, position);
    const distance = Math.hypot(stage.x - at.x, stage.y - at.y);
    if (distance <= reachPx && (nearest === null || distance <= nearest.distance)) nearest = { handle, distance };
  }
  return nearest?.handle ?? null;
}

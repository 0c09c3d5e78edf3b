import { type Handle, handlePosition, moveHandle } from '../traceScene.ts';
import type { Pointing, Tool } from './tool.ts';

/** Moves a handle with the pointer. The handle keeps its distance to the pointer, so it does not jump when taken. */
export function draggingHandle(handle: Handle, from: Pointing, afterwards: Tool): Tool {
  const start = handlePosition(from.scene, handle) ?? from.at;
  const offset = { xPx: start.xPx - from.at.xPx, yPx: start.yPx - from.at.yPx };
  const dragging: Tool = {
    name: 'draggingHandle',
    pointerMove: ({ scene, at, photo }) => ({
      scene: moveHandle(scene, handle, { xPx: at.xPx + offset.xPx, yPx: at.yPx + offset.yPx }, photo),
      next: dragging,
    }),
    pointerUp: ({ scene }) => ({ scene, next: afterwards }),
  };
  return dragging;
}

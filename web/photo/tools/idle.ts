import { draggingHandle } from './draggingHandle.ts';
import type { Tool } from './tool.ts';

/** Waits; taking hold of a handle selects it and starts dragging. */
export const idle: Tool = {
  name: 'idle',
  pointerDown: (pointing) =>
    pointing.handle === null
      ? { scene: pointing.scene, next: idle, selected: null }
      : { scene: pointing.scene, next: draggingHandle(pointing.handle, pointing, idle), selected: pointing.handle },
};

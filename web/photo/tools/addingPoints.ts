import { addTracePoint } from '../traceScene.ts';
import { draggingHandle } from './draggingHandle.ts';
import type { Tool } from './tool.ts';

/** Every tap adds a trace point, which can be dragged on at once; existing handles still move. */
export const addingPoints: Tool = {
  name: 'addingPoints',
  pointerDown: (pointing) => {
    if (pointing.handle !== null) {
      return {
        scene: pointing.scene,
        next: draggingHandle(pointing.handle, pointing, addingPoints),
        selected: pointing.handle,
      };
    }
    const { scene, handle } = addTracePoint(pointing.scene, pointing.at, pointing.photo);
    return { scene, next: draggingHandle(handle, { ...pointing, scene }, addingPoints), selected: handle };
  },
};

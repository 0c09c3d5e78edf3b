import type { PhotoPoint } from '../../../src/photo/unroll.ts';
import type { Handle, PhotoSize, TraceScene } from '../traceScene.ts';

/** What a gesture sees when the pointer goes down, moves or goes up. */
export interface Pointing {
  readonly scene: TraceScene;
  readonly photo: PhotoSize;
  /** Where the pointer is, px of the upright photo. */
  readonly at: PhotoPoint;
  /** The handle within reach of the pointer, if any. */
  readonly handle: Handle | null;
}

/** What follows: a scene (the same one when nothing moved) and the gesture that goes on. */
export interface Step {
  readonly scene: TraceScene;
  readonly next: Tool;
  /** The handle that is now selected; absent when the selection stays. */
  readonly selected?: Handle | null;
}

/** One gesture. Only what it cares about; everything else leaves scene and gesture as they are. */
export interface Tool {
  readonly name: 'idle' | 'draggingHandle' | 'addingPoints';
  readonly pointerDown?: (pointing: Pointing) => Step;
  readonly pointerMove?: (pointing: Pointing) => Step;
  readonly pointerUp?: (pointing: Pointing) => Step;
}

import type { PhotoPoint } from '../../src/photo/unroll.ts';
import { addingPoints } from './tools/addingPoints.ts';
import { idle } from './tools/idle.ts';
import type { Tool } from './tools/tool.ts';
import {
  addTracePoint,
  betweenPoints,
  type Handle,
  handlePosition,
  moveHandle,
  type PhotoSize,
  removeTracePoint,
  type TraceScene,
  withDiameter,
} from './traceScene.ts';

/** A correction by hand in progress: the scene, what is selected, the gesture going on, and the way back. */
export interface Correction {
  readonly photo: PhotoSize;
  readonly scene: TraceScene;
  readonly selected: Handle | null;
  readonly tool: Tool;
  readonly past: readonly TraceScene[];
  readonly future: readonly TraceScene[];
  /** Scene before the gesture that is going on, or null. */
  readonly beforeGesture: TraceScene | null;
}

export type CorrectionAction =
  | {
      readonly do: 'pointerDown' | 'pointerMove' | 'pointerUp';
      readonly at: PhotoPoint;
      readonly handle: Handle | null;
    }
  | { readonly do: 'select'; readonly handle: Handle | null }
  | { readonly do: 'nudge'; readonly handle: Handle; readonly dxPx: number; readonly dyPx: number }
  | { readonly do: 'place'; readonly handle: Handle; readonly at: PhotoPoint }
  | { readonly do: 'setDiameter'; readonly diameterPx: number }
  | { readonly do: 'addAfter' | 'remove'; readonly index: number }
  | { readonly do: 'addPoints'; readonly on: boolean }
  | { readonly do: 'undo' | 'redo' }
  | { readonly do: 'startAgain'; readonly scene: TraceScene };

export const startCorrection = (scene: TraceScene, photo: PhotoSize): Correction => ({
  photo,
  scene,
  selected: null,
  tool: idle,
  past: [],
  future: [],
  beforeGesture: null,
});

/** The correction after one action. Every change of the scene can be undone, a whole drag as one. */
export function correct(state: Correction, action: CorrectionAction): Correction {
  switch (action.do) {
    case 'pointerDown':
    case 'pointerMove':
    case 'pointerUp':
      return pointed(state, action);
    case 'select':
      return { ...state, selected: action.handle };
    case 'nudge': {
      const from = handlePosition(state.scene, action.handle);
      if (from === undefined) return state;
      const to = { xPx: from.xPx + action.dxPx, yPx: from.yPx + action.dyPx };
      return changed(state, moveHandle(state.scene, action.handle, to, state.photo), action.handle);
    }
    case 'place':
      return changed(state, moveHandle(state.scene, action.handle, action.at, state.photo), action.handle);
    case 'setDiameter':
      return changed(state, withDiameter(state.scene, action.diameterPx), state.selected);
    case 'addAfter': {
      const here = state.scene.trace[action.index];
      const next = state.scene.trace[action.index + 1] ?? state.scene.trace[action.index - 1];
      if (here === undefined || next === undefined) return state;
      const { scene, handle } = addTracePoint(state.scene, betweenPoints(here, next, 0.5), state.photo);
      return changed(state, scene, handle);
    }
    case 'remove': {
      const scene = removeTracePoint(state.scene, action.index);
      if (scene === state.scene) return state;
      return changed(state, scene, { kind: 'trace', index: Math.min(action.index, scene.trace.length - 1) });
    }
    case 'addPoints':
      return { ...state, tool: action.on ? addingPoints : idle };
    case 'undo':
      return undone(state);
    case 'redo':
      return redone(state);
    case 'startAgain':
      return changed(state, action.scene, null);
  }
}

function pointed(
  state: Correction,
  {
    do: gesture,
    at,
    handle,
  }: Extract<CorrectionAction, { readonly at: PhotoPoint; readonly do: 'pointerDown' | 'pointerMove' | 'pointerUp' }>,
): Correction {
  const step = state.tool[gesture]?.({ scene: state.scene, photo: state.photo, at, handle });
  if (step === undefined) return state;
  const moved: Correction = {
    ...state,
    scene: step.scene,
    tool: step.next,
    selected: step.selected === undefined ? state.selected : step.selected,
  };
  if (gesture === 'pointerDown') return { ...moved, beforeGesture: state.scene };
  if (gesture === 'pointerMove' || state.beforeGesture === null) return moved;
  const before = state.beforeGesture;
  const ended = { ...moved, beforeGesture: null };
  return before === moved.scene ? ended : { ...ended, past: [...state.past, before], future: [] };
}

const changed = (state: Correction, scene: TraceScene, selected: Handle | null): Correction =>
  scene === state.scene ? state : { ...state, scene, selected, past: [...state.past, state.scene], future: [] };

function undone(state: Correction): Correction {
  const scene = state.past.at(-1);
  if (scene === undefined) return state;
  return {
    ...state,
    scene,
    selected: stillThere(scene, state.selected),
    past: state.past.slice(0, -1),
    future: [state.scene, ...state.future],
  };
}

function redone(state: Correction): Correction {
  const [scene, ...future] = state.future;
  if (scene === undefined) return state;
  return { ...state, scene, selected: stillThere(scene, state.selected), past: [...state.past, state.scene], future };
}

const stillThere = (scene: TraceScene, handle: Handle | null): Handle | null =>
  handle !== null && handlePosition(scene, handle) !== undefined ? handle : null;

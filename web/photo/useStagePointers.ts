import { type PointerEvent, type RefObject, useEffect, useEffectEvent, useRef } from 'react';
import type { StagePoint } from './viewport.ts';

export type PointerKind = 'mouse' | 'pen' | 'touch';

interface StageGestures {
  /** A pointer went down alone; true when something was taken hold of, false lets the photo pan. */
  readonly onDown: (at: StagePoint, kind: PointerKind) => boolean;
  readonly onMove: (at: StagePoint) => void;
  readonly onUp: (at: StagePoint) => void;
  readonly onPan: (dx: number, dy: number) => void;
  readonly onZoom: (factor: number, at: StagePoint) => void;
  /** Whether a plain wheel zooms; otherwise only with Ctrl, so that the page still scrolls. */
  readonly wheelZooms: boolean;
}

const kindOf = (type: string): PointerKind => (type === 'touch' || type === 'pen' ? type : 'mouse');

/** One pointer drags or pans, two zoom, the wheel zooms. */
export function useStagePointers(stageRef: RefObject<Element | null>, gestures: StageGestures) {
  const down = useRef(new Map<number, StagePoint>());
  const holding = useRef(false);

  const at = (event: { clientX: number; clientY: number }): StagePoint => {
    const box = stageRef.current?.getBoundingClientRect();
    return { x: event.clientX - (box?.left ?? 0), y: event.clientY - (box?.top ?? 0) };
  };

  const turnWheel = useEffectEvent((event: WheelEvent) => {
    if (!gestures.wheelZooms && !event.ctrlKey) return;
    event.preventDefault();
    gestures.onZoom(Math.exp(-event.deltaY * (event.deltaMode === 1 ? 0.05 : 0.002)), at(event));
  });
  useEffect(() => {
    const element = stageRef.current;
    const turned = (event: Event) => turnWheel(event as WheelEvent);
    // React listens to the wheel passively; only an own listener may keep the page from scrolling.
    element?.addEventListener('wheel', turned, { passive: false });
    return () => element?.removeEventListener('wheel', turned);
  }, [stageRef]);

  const onPointerDown = (event: PointerEvent<Element>) => {
    if (event.button !== 0) return;
    event.currentTarget.setPointerCapture(event.pointerId);
    down.current.set(event.pointerId, at(event));
    if (down.current.size === 1) holding.current = gestures.onDown(at(event), kindOf(event.pointerType));
    else if (holding.current) {
      gestures.onUp(at(event));
      holding.current = false;
    }
  };

  const onPointerMove = (event: PointerEvent<Element>) => {
    const before = down.current.get(event.pointerId);
    if (before === undefined) return;
    const here = at(event);
    const other = [...down.current].find(([id]) => id !== event.pointerId)?.[1];
    down.current.set(event.pointerId, here);
    if (other !== undefined) {
      const apart = Math.hypot(here.x - other.x, here.y - other.y);
      const apartBefore = Math.hypot(before.x - other.x, before.y - other.y);
      if (apart > 0 && apartBefore > 0)
        gestures.onZoom(apart / apartBefore, { x: (here.x + other.x) / 2, y: (here.y + other.y) / 2 });
    } else if (holding.current) gestures.onMove(here);
    else gestures.onPan(here.x - before.x, here.y - before.y);
  };

  const onPointerUp = (event: PointerEvent<Element>) => {
    if (!down.current.delete(event.pointerId)) return;
    if (holding.current) gestures.onUp(at(event));
    holding.current = false;
  };

  return { onPointerDown, onPointerMove, onPointerUp, onPointerCancel: onPointerUp };
}

import { type KeyboardEvent, useEffect, useRef } from 'react';
import { CORRECTION } from '../texts/photo.ts';
import type { CorrectionAction } from './correction.ts';
import { type Handle, handleKey, handlePosition, handlesOf, type TraceScene } from './traceScene.ts';
import { toStage, type Viewport } from './viewport.ts';

interface HandlesProps {
  readonly scene: TraceScene;
  readonly viewport: Viewport;
  readonly selected: Handle | null;
  readonly act: (action: CorrectionAction) => void;
}

const ARROWS: Readonly<Record<string, readonly [number, number]>> = {
  ArrowLeft: [-1, 0],
  ArrowRight: [1, 0],
  ArrowUp: [0, -1],
  ArrowDown: [0, 1],
};

/** What can be taken hold of, each reachable by Tab and moved by the arrow keys. */
export function Handles({ scene, viewport, selected, act }: HandlesProps) {
  const selectedKey = selected === null ? null : handleKey(selected);
  const elements = useRef(new Map<string, SVGGElement>());

  useEffect(() => {
    if (selectedKey !== null) elements.current.get(selectedKey)?.focus({ preventScroll: true });
  }, [selectedKey]);

  const pressed = (event: KeyboardEvent, handle: Handle) => {
    const arrow = ARROWS[event.key];
    if (arrow !== undefined) {
      const stepPx = event.shiftKey ? 10 : 1;
      act({ do: 'nudge', handle, dxPx: arrow[0] * stepPx, dyPx: arrow[1] * stepPx });
    } else if (handle.kind === 'trace' && (event.key === 'Delete' || event.key === 'Backspace')) {
      act({ do: 'remove', index: handle.index });
    } else if (handle.kind === 'trace' && (event.key === 'Insert' || event.key === '+')) {
      act({ do: 'addAfter', index: handle.index });
    } else return;
    event.preventDefault();
  };

  return handlesOf(scene).map((handle) => {
    const position = handlePosition(scene, handle);
    if (position === undefined) return null;
    const key = handleKey(handle);
    const { x, y } = toStage(viewport, position);
    return (
      // biome-ignore lint/a11y/useSemanticElements: a button cannot stand inside a drawing
      <g
        key={key}
        ref={(element) => {
          if (element === null) elements.current.delete(key);
          else elements.current.set(key, element);
        }}
        role="button"
        tabIndex={0}
        className={`handle handle-${handle.kind}`}
        aria-pressed={key === selectedKey}
        aria-label={CORRECTION.handle.at(handleName(handle, scene), position.xPx.toFixed(1), position.yPx.toFixed(1))}
        transform={`translate(${x.toFixed(2)} ${y.toFixed(2)})`}
        onKeyDown={(event) => pressed(event, handle)}
        onFocus={() => act({ do: 'select', handle })}
      >
        <circle className="handle-halo" r={11} />
        <HandleShape handle={handle} />
      </g>
    );
  });
}

function HandleShape({ handle }: { readonly handle: Handle }) {
  switch (handle.kind) {
    case 'trace':
      return <circle className="handle-body" r={5} />;
    case 'edge':
      return <path className="handle-body" d="M0 -8L7 0L0 8L-7 0Z" />;
    case 'axis-end':
      return <rect className="handle-body" x={-6} y={-6} width={12} height={12} rx={2} />;
    case 'axis':
      return <path className="handle-body" d="M-8 -2.5H-2.5V-8H2.5V-2.5H8V2.5H2.5V8H-2.5V2.5H-8Z" />;
  }
}

/** What a handle is called. */
export function handleName(handle: Handle, scene: TraceScene): string {
  switch (handle.kind) {
    case 'axis-end':
      return CORRECTION.handle[handle.end];
    case 'axis':
      return CORRECTION.handle.axis;
    case 'edge':
      return CORRECTION.handle[handle.side];
    case 'trace':
      return CORRECTION.handle.trace(handle.index + 1, scene.trace.length);
  }
}

import { PHOTO } from '../texts/photo.ts';
import type { TraceScene } from './traceScene.ts';
import type { ViewportControl } from './useViewport.ts';
import { boxAround, type Size } from './viewport.ts';

interface ZoomBarProps {
  readonly control: ViewportControl;
  readonly scene: TraceScene | null;
  readonly photo: Size;
}

/** Around the break: the trace with this many diameters on each side. */
const MARGIN_DIAMETERS = 0.75;

/** Buttons for what wheel and fingers also do. */
export function ZoomBar({ control, scene, photo }: ZoomBarProps) {
  return (
    <div className="zoom-bar">
      <button type="button" aria-label={PHOTO.zoomOut} title={PHOTO.zoomOut} onClick={() => control.zoom(1 / 1.5)}>
        −
      </button>
      <button type="button" aria-label={PHOTO.zoomIn} title={PHOTO.zoomIn} onClick={() => control.zoom(1.5)}>
        +
      </button>
      <button type="button" onClick={control.showAll}>
        {PHOTO.showAll}
      </button>
      {scene !== null && scene.trace.length > 0 && (
        <button
          type="button"
          onClick={() => control.show(boxAround(scene.trace, scene.diameterPx * MARGIN_DIAMETERS, photo))}
        >
          {PHOTO.showBreak}
        </button>
      )}
    </div>
  );
}

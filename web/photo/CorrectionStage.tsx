import { useRef } from 'react';
import type { PhotoPoint } from '../../src/photo/unroll.ts';
import type { Correction, CorrectionAction } from './correction.ts';
import { Handles } from './Handles.tsx';
import { handleAt, REACH_PX } from './handleAt.ts';
import { Legend } from './Legend.tsx';
import { Loupe } from './Loupe.tsx';
import { Overlay } from './Overlay.tsx';
import { overlayMarks } from './overlay.ts';
import { PhotoStage } from './PhotoStage.tsx';
import { handlePosition } from './traceScene.ts';
import { useStagePointers } from './useStagePointers.ts';
import { useViewport } from './useViewport.ts';
import { toPhotoPoint, toStage } from './viewport.ts';
import { ZoomBar } from './ZoomBar.tsx';

interface CorrectionStageProps {
  readonly sha256: string;
  readonly fileName: string;
  readonly correction: Correction;
  readonly fit: readonly PhotoPoint[];
  readonly act: (action: CorrectionAction) => void;
}

/** The photo with handles on axis, edges and trace. Gestures only say what happened; `correct` decides what follows. */
export function CorrectionStage({ sha256, fileName, correction, fit, act }: CorrectionStageProps) {
  const { photo, scene, selected, tool } = correction;
  const stageRef = useRef<SVGSVGElement>(null);
  const control = useViewport(stageRef, photo);
  const { viewport } = control;

  const pointers = useStagePointers(stageRef, {
    onDown: (at, kind) => {
      const handle = handleAt(scene, viewport, at, REACH_PX[kind]);
      act({ do: 'pointerDown', at: toPhotoPoint(viewport, at), handle });
      return handle !== null || tool.name === 'addingPoints';
    },
    onMove: (at) => act({ do: 'pointerMove', at: toPhotoPoint(viewport, at), handle: null }),
    onUp: (at) => act({ do: 'pointerUp', at: toPhotoPoint(viewport, at), handle: null }),
    onPan: control.pan,
    onZoom: control.zoom,
    wheelZooms: true,
  });

  const dragged = tool.name === 'draggingHandle' && selected !== null ? handlePosition(scene, selected) : undefined;
  const farSide = dragged !== undefined && toStage(viewport, dragged).x > control.stage.width / 2 ? 'left' : 'right';
  return (
    <div className="photo-view correcting">
      <div className="stage-frame">
        <PhotoStage
          stageRef={stageRef}
          full
          className={tool.name === 'addingPoints' ? 'adding' : 'working'}
          pointers={pointers}
          {...{ sha256, fileName, photo, viewport }}
        >
          <Overlay marks={overlayMarks(scene, fit, viewport)} />
          <Handles scene={scene} viewport={viewport} selected={selected} act={act} />
        </PhotoStage>
        {dragged !== undefined && <Loupe at={dragged} corner={farSide} {...{ sha256, photo, scene, viewport }} />}
      </div>
      <div className="under-photo">
        <Legend names={fit.length > 1 ? ['axis', 'edge', 'trace', 'fit'] : ['axis', 'edge', 'trace']} />
        <ZoomBar control={control} scene={scene} photo={photo} />
      </div>
    </div>
  );
}

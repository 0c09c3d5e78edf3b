import { useMemo, useRef } from 'react';
import type { Reading } from '../../src/records/reading.ts';
import { Legend } from './Legend.tsx';
import { Overlay } from './Overlay.tsx';
import { overlayMarks } from './overlay.ts';
import { PhotoStage } from './PhotoStage.tsx';
import { sceneOfReading } from './sceneOfReading.ts';
import type { PhotoSize } from './traceScene.ts';
import { useStagePointers } from './useStagePointers.ts';
import { useViewport } from './useViewport.ts';
import { ZoomBar } from './ZoomBar.tsx';

interface PhotoViewProps {
  readonly sha256: string;
  readonly fileName: string;
  readonly photo: PhotoSize;
  readonly reading: Reading | null;
}

const ignore = () => {};

/** A photo with what one reading found on it, for looking at. */
export function PhotoView({ sha256, fileName, photo, reading }: PhotoViewProps) {
  const stageRef = useRef<SVGSVGElement>(null);
  const control = useViewport(stageRef, photo);
  const scene = useMemo(() => (reading === null ? null : sceneOfReading(reading)), [reading]);
  const pointers = useStagePointers(stageRef, {
    onDown: () => false,
    onMove: ignore,
    onUp: ignore,
    onPan: control.pan,
    onZoom: control.zoom,
    wheelZooms: false,
  });
  return (
    <div className="photo-view">
      <PhotoStage
        stageRef={stageRef}
        className="looking"
        pointers={pointers}
        {...{ sha256, fileName, photo }}
        viewport={control.viewport}
      >
        {scene !== null && <Overlay marks={overlayMarks(scene, [], control.viewport)} />}
      </PhotoStage>
      <div className="under-photo">
        {scene !== null && <Legend names={['axis', 'edge', 'trace']} />}
        <ZoomBar control={control} scene={scene} photo={photo} />
      </div>
    </div>
  );
}

import type { PhotoPoint } from '../../src/photo/unroll.ts';
import { uprightPhotoAddress } from '../api/laboratory.ts';
import { Overlay } from './Overlay.tsx';
import { overlayMarks } from './overlay.ts';
import { PhotoImage } from './PhotoStage.tsx';
import type { PhotoSize, TraceScene } from './traceScene.ts';
import type { Viewport } from './viewport.ts';

interface LoupeProps {
  readonly sha256: string;
  readonly photo: PhotoSize;
  readonly scene: TraceScene;
  readonly at: PhotoPoint;
  readonly viewport: Viewport;
  /** Corner of the stage it sits in, away from the pointer. */
  readonly corner: 'left' | 'right';
}

const SIZE_PX = 168;
const MAGNIFIES = 3;

/** While something is dragged, the place under the finger, three times larger, in a corner. */
export function Loupe({ sha256, photo, scene, at, viewport, corner }: LoupeProps) {
  const scale = viewport.scale * MAGNIFIES;
  const inside: Viewport = { scale, leftPx: SIZE_PX / 2 - at.xPx * scale, topPx: SIZE_PX / 2 - at.yPx * scale };
  return (
    <svg className={`loupe loupe-${corner}`} width={SIZE_PX} height={SIZE_PX} aria-hidden="true">
      <PhotoImage address={uprightPhotoAddress(sha256, photo.width)} photo={photo} viewport={inside} />
      <Overlay marks={overlayMarks(scene, [], inside)} />
      <circle className="loupe-aim" cx={SIZE_PX / 2} cy={SIZE_PX / 2} r={9} />
    </svg>
  );
}

import type { PointerEvent, ReactNode, Ref } from 'react';
import { uprightPhotoAddress } from '../api/laboratory.ts';
import { PHOTO } from '../texts/photo.ts';
import type { PhotoSize } from './traceScene.ts';
import type { Viewport } from './viewport.ts';

/** Enough for any screen; larger photos are only fetched in full when a hand works on them. */
const VIEW_WIDTH_PX = 1600;

interface PhotoStageProps {
  readonly stageRef: Ref<SVGSVGElement>;
  readonly sha256: string;
  readonly fileName: string;
  readonly photo: PhotoSize;
  readonly viewport: Viewport;
  /** Full resolution, for work by hand. */
  readonly full?: boolean;
  readonly className?: string;
  readonly pointers?: {
    readonly onPointerDown: (event: PointerEvent<Element>) => void;
    readonly onPointerMove: (event: PointerEvent<Element>) => void;
    readonly onPointerUp: (event: PointerEvent<Element>) => void;
    readonly onPointerCancel: (event: PointerEvent<Element>) => void;
  };
  readonly children?: ReactNode;
}

/** The upright photo under its overlay. Everything drawn on it is in stage coordinates. */
export function PhotoStage(props: PhotoStageProps) {
  const { stageRef, sha256, fileName, photo, viewport, full = false, className = '', pointers, children } = props;
  const widthPx = full ? photo.width : Math.min(photo.width, VIEW_WIDTH_PX);
  return (
    // biome-ignore lint/a11y/useSemanticElements: a drawing over a photo has no element of its own
    <svg
      ref={stageRef}
      className={`photo-stage ${className}`}
      role="group"
      aria-label={PHOTO.stageLabel(fileName)}
      {...pointers}
    >
      <PhotoImage address={uprightPhotoAddress(sha256, widthPx)} photo={photo} viewport={viewport} />
      {children}
    </svg>
  );
}

/** Pixel centres are integers, so the picture begins half a pixel before (0, 0). */
export function PhotoImage({
  address,
  photo,
  viewport,
}: {
  readonly address: string;
  readonly photo: PhotoSize;
  readonly viewport: Viewport;
}) {
  return (
    <image
      href={address}
      x={viewport.leftPx - 0.5 * viewport.scale}
      y={viewport.topPx - 0.5 * viewport.scale}
      width={photo.width * viewport.scale}
      height={photo.height * viewport.scale}
      preserveAspectRatio="none"
    />
  );
}

import { type RefObject, useCallback, useEffect, useMemo, useState } from 'react';
import { type Box, fitBox, fitPhoto, panBy, type Size, type StagePoint, type Viewport, zoomAt } from './viewport.ts';

export interface ViewportControl {
  readonly viewport: Viewport;
  readonly stage: Size;
  readonly zoom: (factor: number, at?: StagePoint) => void;
  readonly pan: (dx: number, dy: number) => void;
  /** The whole photo. */
  readonly showAll: () => void;
  readonly show: (box: Box) => void;
}

/** Zoom and pan of a photo on a stage element; follows the stage's size as long as nobody has zoomed. */
export function useViewport(stageRef: RefObject<Element | null>, photo: Size): ViewportControl {
  const [stage, setStage] = useState<Size>({ width: 600, height: 400 });
  const [chosen, setChosen] = useState<Viewport | null>(null);

  useEffect(() => {
    const element = stageRef.current;
    if (element === null) return;
    const observer = new ResizeObserver(() => setStage({ width: element.clientWidth, height: element.clientHeight }));
    observer.observe(element);
    return () => observer.disconnect();
  }, [stageRef]);

  const fitted = useMemo(() => fitPhoto(photo, stage), [photo, stage]);
  const viewport = chosen ?? fitted;

  const zoom = useCallback(
    (factor: number, at?: StagePoint) =>
      setChosen((now) =>
        zoomAt(now ?? fitted, factor, at ?? { x: stage.width / 2, y: stage.height / 2 }, photo, stage),
      ),
    [fitted, photo, stage],
  );
  const pan = useCallback(
    (dx: number, dy: number) => setChosen((now) => panBy(now ?? fitted, dx, dy, photo, stage)),
    [fitted, photo, stage],
  );
  const showAll = useCallback(() => setChosen(null), []);
  const show = useCallback((box: Box) => setChosen(fitBox(box, stage)), [stage]);
  return { viewport, stage, zoom, pan, showAll, show };
}

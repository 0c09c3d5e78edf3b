import { useDeferredValue, useMemo, useState } from 'react';
import { type Correction, type CorrectionAction, correct, startCorrection } from './correction.ts';
import { type HandResult, measureScene } from './measureScene.ts';
import type { PhotoSize, TraceScene } from './traceScene.ts';

/** A correction by hand that is open on a photo. */
export interface OpenCorrection {
  readonly sha256: string;
  readonly start: TraceScene;
  readonly correction: Correction;
  /** Follows the scene; while the hand is fast it may be a moment behind. */
  readonly result: HandResult;
}

export interface CorrectionControl {
  readonly open: OpenCorrection | null;
  readonly begin: (sha256: string, start: TraceScene, photo: PhotoSize) => void;
  readonly act: (action: CorrectionAction) => void;
  readonly close: () => void;
}

/** At most one correction is open on a sheet. */
export function useCorrection(): CorrectionControl {
  const [state, setState] = useState<Omit<OpenCorrection, 'result'> | null>(null);
  const scene = state?.correction.scene ?? null;
  const photo = state?.correction.photo ?? null;
  // Measuring takes longer than moving a point, so the picture goes first and the numbers follow.
  const calmScene = useDeferredValue(scene);
  const result = useMemo(
    () => (calmScene === null || photo === null ? null : measureScene(calmScene, photo)),
    [calmScene, photo],
  );
  const open = useMemo(() => (state === null || result === null ? null : { ...state, result }), [state, result]);
  return {
    open,
    begin: (sha256, start, size) => setState({ sha256, start, correction: startCorrection(start, size) }),
    act: (action) => setState((now) => now && { ...now, correction: correct(now.correction, action) }),
    close: () => setState(null),
  };
}

import { useState } from 'react';
import { asProblem } from '../api/http.ts';
import { measureAgain, sendPhotos } from '../api/laboratory.ts';
import type { Problem } from '../api/problem.ts';
import type { SheetWithoutTest } from '../api/types.ts';

/** Where the work on photos stands: sending (share 0 to 1), measuring, or at rest. */
export type UploadState =
  | { readonly phase: 'rest' }
  | { readonly phase: 'sending'; readonly share: number }
  | { readonly phase: 'measuring' };

export interface PhotoUpload {
  readonly state: UploadState;
  readonly problem: Problem | null;
  readonly send: (photos: readonly File[]) => void;
  readonly again: (sha256: string) => void;
}

/** Sends photos of a test and has them measured. */
export function usePhotoUpload(testId: string, onDone: (answer: SheetWithoutTest) => void): PhotoUpload {
  const [state, setState] = useState<UploadState>({ phase: 'rest' });
  const [problem, setProblem] = useState<Problem | null>(null);

  const run = async (work: () => Promise<SheetWithoutTest>) => {
    setProblem(null);
    try {
      onDone(await work());
    } catch (error) {
      setProblem(asProblem(error));
    } finally {
      setState({ phase: 'rest' });
    }
  };

  return {
    state,
    problem,
    send: (photos) => {
      setState({ phase: 'sending', share: 0 });
      const sent = (share: number) => setState(share < 1 ? { phase: 'sending', share } : { phase: 'measuring' });
      void run(() => sendPhotos(testId, photos, sent));
    },
    again: (sha256) => {
      setState({ phase: 'measuring' });
      void run(() => measureAgain(testId, sha256));
    },
  };
}

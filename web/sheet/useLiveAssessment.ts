import { useMemo } from 'react';
import { LabError } from '../../src/errors.ts';
import { ENGINE_VERSION } from '../../src/photo/measurement.ts';
import type { Reading } from '../../src/records/reading.ts';
import type { TestInput } from '../../src/records/test.ts';
import { assessTest } from '../../src/verdict/assessTest.ts';
import type { Assessment } from '../../src/verdict/model.ts';
import { pointPxOf } from '../photo/sceneOfReading.ts';
import type { OpenCorrection } from '../photo/useCorrection.ts';
import type { ShownReading } from './StatementPanel.tsx';

export interface LiveAssessment {
  /** Null while the form has no geometry to compute with. */
  readonly assessment: Assessment | null;
  readonly reading: ShownReading | null;
  /** True while it rests on a trace that is being dragged. */
  readonly provisional: boolean;
}

const PROVISIONAL_ID = 'provisional';

/**
 * The assessment of what stands in the form and on the photo now, by the same pure functions the service uses.
 * What is stored is always computed by the service.
 */
export function useLiveAssessment(
  input: TestInput | null,
  readings: readonly Reading[],
  open: OpenCorrection | null,
): LiveAssessment {
  const provisional = useMemo(() => (open === null ? null : provisionalReading(open)), [open]);
  const assessment = useMemo(() => {
    if (input === null) return null;
    try {
      return assessTest(input, provisional === null ? readings : [...readings, provisional]);
    } catch (error) {
      if (error instanceof LabError) return null;
      throw error;
    }
  }, [input, readings, provisional]);

  const governing = [...readings, ...(provisional === null ? [] : [provisional])].find(
    ({ id }) => id === assessment?.readingId,
  );
  const result = governing?.result;
  return {
    assessment,
    reading: result === undefined || result.outcome === 'not-measured' ? null : result,
    provisional: provisional !== null,
  };
}

/** The trace on the photo as the newest reading by hand, which the rule then rests on. */
function provisionalReading({ sha256, correction, result }: OpenCorrection): Reading | null {
  if (result.measured === null) return null;
  const { scene, photo } = correction;
  const { fittedPx: _, ...measured } = result.measured;
  return {
    id: PROVISIONAL_ID,
    testId: '',
    method: 'photo-hand',
    engineVersion: ENGINE_VERSION,
    photoSha256: sha256,
    instrument: null,
    operator: null,
    remarks: null,
    // Later than every stored moment, so that it is the newest.
    createdAt: '9999-12-31T23:59:59.999Z',
    setAside: false,
    result: {
      ...measured,
      outcome: 'measured',
      axisPx: [pointPxOf(scene.axis.a), pointPxOf(scene.axis.b)],
      diameterPx: scene.diameterPx,
      tracePx: scene.trace.map(pointPxOf),
      widthPx: photo.width,
      heightPx: photo.height,
      sha256,
      elapsedMs: 0,
    },
  };
}

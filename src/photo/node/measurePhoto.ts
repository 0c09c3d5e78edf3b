import { createHash } from 'node:crypto';
import sharp from 'sharp';
import type { PhotoMeasurement } from '../../records/reading.ts';
import { measureByHand } from '../byHand.ts';
import type { MeasureOptions } from '../measurement.ts';
import { measurePicture } from '../measurePicture.ts';
import type { StagePicture } from '../stages.ts';
import { openPhoto } from './decode.ts';

/** Long side of the picture the measurement works on, px. */
const LONG_SIDE_PX = 1600;
/** Camera tilt taken when none is stated: ± 3° (k = 2). */
const USUAL_CAMERA_TILT_U_DEG = 1.5;

/** Measures one photo. Never throws for a bad photo: that is `not-measured` with a reason. */
export async function measurePhoto(bytes: Uint8Array, options: MeasureOptions = {}): Promise<PhotoMeasurement> {
  const started = performance.now();
  const sha256 = createHash('sha256').update(bytes).digest('hex');
  const elapsed = () => Math.round((performance.now() - started) * 10) / 10;
  const opened = await openPhoto(bytes);
  if (opened.outcome === 'refused') {
    const { code, message, widthPx, heightPx } = opened;
    return {
      outcome: 'not-measured',
      reason: { code, message },
      ...(widthPx !== undefined && heightPx !== undefined ? { widthPx, heightPx } : {}),
      sha256,
      elapsedMs: elapsed(),
      warnings: [],
    };
  }
  const { photo } = opened;
  const size = { widthPx: photo.widthPx, heightPx: photo.heightPx, sha256 };
  const tilt = options.cameraTiltStandardUncertaintyDeg ?? USUAL_CAMERA_TILT_U_DEG;
  if (options.byHand !== undefined) {
    const { axisPx, diameterPx, tracePx } = options.byHand;
    const { fittedPx: _, ...measured } = measureByHand({
      axisPx,
      diameterPx,
      tracePx,
      widthPx: photo.widthPx,
      heightPx: photo.heightPx,
      cameraTiltStandardUncertaintyDeg: tilt,
      focalOverLongSide: photo.focalOverLongSide,
    });
    return {
      outcome: 'measured',
      ...measured,
      axisPx: [axisPx[0], axisPx[1]],
      diameterPx,
      tracePx: [...tracePx],
      ...size,
      elapsedMs: elapsed(),
    };
  }
  let picture: Awaited<ReturnType<typeof photo.whole>>;
  try {
    picture = await photo.whole(LONG_SIDE_PX);
  } catch (error) {
    const cause = error instanceof Error ? error.message.split('\n')[0] : String(error);
    return {
      outcome: 'not-measured',
      reason: {
        code: 'not-a-photo',
        message: `the photo cannot be decoded (${cause}); it is damaged or cut short, take or copy it again`,
      },
      ...size,
      elapsedMs: elapsed(),
      warnings: [],
    };
  }
  const stages: { name: string; stage: StagePicture }[] = [];
  const result = measurePicture(picture, {
    ...(options.onStage !== undefined && {
      onStage: (name: string, stage: StagePicture) => stages.push({ name, stage }),
    }),
    cameraTiltStandardUncertaintyDeg: tilt,
    focalOverLongSide: photo.focalOverLongSide,
  });
  for (const { name, stage } of stages) {
    const raw = { width: stage.widthPx, height: stage.heightPx, channels: 3 } as const;
    options.onStage?.(name, await sharp(stage.rgb, { raw }).png().toBuffer());
  }
  return { ...result, ...size, elapsedMs: elapsed() };
}

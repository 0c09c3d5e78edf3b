import sharp from 'sharp';
import { describe, expect, it } from 'vitest';
import { measurePhoto } from '../../src/photo/node/measurePhoto.ts';
import { Random } from '../pictures/random.ts';
import { storePhoto } from '../pictures/storePhoto.ts';
import { NEGATIVE_NAMES, planPhotoWithoutBreak } from '../pictures/withoutBreak.ts';
import { easyPair } from './renderedPhoto.ts';

async function expectRefusal(bytes: Uint8Array): Promise<void> {
  const result = await measurePhoto(bytes);
  const told = result.outcome === 'measured' ? `${result.planeAngleDeg}° in view ${result.view}` : result.reason.code;
  expect(result.outcome, told).toBe('not-measured');
}

/** A wall of one tone with the noise of a camera. */
function wall(level: number, sigma: number): Promise<Uint8Array> {
  const random = new Random(level);
  const [width, height] = [720, 480];
  const pixels = Uint8Array.from({ length: 3 * width * height }, () =>
    Math.min(255, Math.max(0, Math.round(random.normal(level, sigma)))),
  );
  return sharp(pixels, { raw: { width, height, channels: 3 } })
    .jpeg()
    .toBuffer();
}

describe('photos without a break are refused', () => {
  it.each([
    ['grey', 128, 6],
    ['black', 2, 2],
    ['white', 253, 2],
    ['grey, very noisy', 110, 30],
  ] as const)('a %s wall', async (_name, level, sigma) => {
    await expectRefusal(await wall(level, sigma));
  });

  it('a specimen blurred beyond recognition', async () => {
    await expectRefusal(await easyPair().upright().blur(45).jpeg().toBuffer());
  });

  it.each(NEGATIVE_NAMES)('%s', async (name) => {
    const random = new Random(31_337);
    await expectRefusal(await storePhoto(planPhotoWithoutBreak(name, random, 0.6), random));
  });
});

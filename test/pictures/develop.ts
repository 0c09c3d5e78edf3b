import type { Random } from './random.ts';
import type { LinearPicture } from './render.ts';

/** What lens, sensor and camera program do to the light. */
export interface CameraWork {
  /** Standard deviation of the blur of lens and sensor, px. */
  readonly blurPx: number;
  /** Length of a smear by a moving hand, px, and its direction in degrees; 0 = none. */
  readonly smearPx: number;
  readonly smearDeg: number;
  /** Exposure against a middle one, in stops. */
  readonly exposureStops: number;
  /** Noise of a middle grey, in shares of full scale. */
  readonly noise: number;
  /** Darkening at the corner of the picture, share. */
  readonly vignette: number;
  /** Colour cast: factors of red and blue. */
  readonly redGain: number;
  readonly blueGain: number;
}

/** Turns linear light into 8-bit sRGB, three bytes a pixel. */
export function develop(picture: LinearPicture, work: CameraWork, random: Random): Uint8Array {
  const { widthPx, heightPx } = picture;
  blur(picture, work.blurPx);
  if (work.smearPx > 0.5) smear(picture, work.smearPx, work.smearDeg);
  const gain = exposure(picture) * 2 ** work.exposureStops;
  const { rgb } = picture;
  const out = new Uint8Array(rgb.length);
  const curve = toneCurve();
  const noise = fastNoise(random);
  const middleX = widthPx / 2;
  const middleY = heightPx / 2;
  const corner = middleX ** 2 + middleY ** 2;
  for (let row = 0, at = 0; row < heightPx; row++) {
    // Neighbouring pixels share a part of their noise, as after demosaicing.
    let carried = 0;
    for (let column = 0; column < widthPx; column++, at += 3) {
      const away = ((column - middleX) ** 2 + (row - middleY) ** 2) / corner;
      const level = gain * (1 - work.vignette * away);
      carried = 0.5 * carried + noise();
      for (let channel = 0; channel < 3; channel++) {
        const tint = channel === 0 ? work.redGain : channel === 2 ? work.blueGain : 1;
        const light = level * tint * (rgb[at + channel] as number);
        const deviation = work.noise * Math.sqrt(0.02 + Math.min(1, light) * 0.9);
        const value = light + deviation * (0.75 * carried + 0.6 * noise());
        out[at + channel] = curve[Math.min(4095, Math.max(0, Math.round(value * 3000)))] as number;
      }
    }
  }
  return out;
}

/** Gain that brings the picture to a middle grey, held back where its bright parts would be lost. */
function exposure({ rgb }: LinearPicture): number {
  const greens: number[] = [];
  for (let at = 1; at < rgb.length; at += 3 * 97) greens.push(rgb[at] as number);
  greens.sort((a, b) => a - b);
  const at = (share: number) => greens[Math.floor(share * (greens.length - 1))] as number;
  const middle = Math.max(0.01, (greens.reduce((sum, green) => sum + Math.sqrt(green), 0) / greens.length) ** 2);
  return Math.min(0.26 / middle, 0.85 / Math.max(0.01, at(0.97)));
}

/** sRGB with a slight S and a soft shoulder; 4096 steps up to 1.365 of full scale. */
function toneCurve(): Uint8Array {
  const curve = new Uint8Array(4096);
  for (let i = 0; i < curve.length; i++) {
    const light = i / 3000;
    const shoulder = light < 0.8 ? light : 0.8 + 0.2 * (1 - Math.exp(-(light - 0.8) / 0.2));
    const encoded = shoulder <= 0.0031308 ? 12.92 * shoulder : 1.055 * shoulder ** (1 / 2.4) - 0.055;
    const s = encoded + 0.06 * Math.sin(2 * Math.PI * (encoded - 0.5)) * 0.5;
    curve[i] = Math.round(255 * Math.min(1, Math.max(0, s)));
  }
  return curve;
}

/** Nearly normal noise, unit standard deviation, from four bytes of a xorshift generator (Marsaglia 2003). */
function fastNoise(random: Random): () => number {
  let state = random.integer(1, 0x7fffffff);
  return () => {
    state ^= state << 13;
    state ^= state >>> 17;
    state ^= state << 5;
    const sum = (state & 255) + ((state >>> 8) & 255) + ((state >>> 16) & 255) + (state >>> 24);
    return (sum - 510) / 147.8;
  };
}

function blur(picture: LinearPicture, sigma: number): void {
  if (sigma < 0.2) return;
  const reach = Math.ceil(2.6 * sigma);
  const weights = Array.from({ length: 2 * reach + 1 }, (_, i) => Math.exp(-((i - reach) ** 2) / (2 * sigma * sigma)));
  const total = weights.reduce((sum, w) => sum + w, 0);
  const kernel = Float64Array.from(weights, (w) => w / total);
  const { widthPx, heightPx, rgb } = picture;
  along(rgb, widthPx, heightPx, 3, 3 * widthPx, kernel, reach);
  along(rgb, heightPx, widthPx, 3 * widthPx, 3, kernel, reach);
}

/** Weighted running sum along lines of `count` pixels `step` apart, `lines` of them `lineStep` apart. */
function along(
  rgb: Float32Array,
  count: number,
  lines: number,
  step: number,
  lineStep: number,
  kernel: Float64Array,
  reach: number,
): void {
  const held = new Float32Array(count + 2 * reach);
  for (let line = 0; line < lines; line++) {
    for (let channel = 0; channel < 3; channel++) {
      const start = line * lineStep + channel;
      for (let i = -reach; i < count + reach; i++)
        held[i + reach] = rgb[start + Math.min(count - 1, Math.max(0, i)) * step] as number;
      for (let i = 0; i < count; i++) {
        let sum = 0;
        for (let k = 0; k < kernel.length; k++) sum += (kernel[k] as number) * (held[i + k] as number);
        rgb[start + i * step] = sum;
      }
    }
  }
}

function smear(picture: LinearPicture, lengthPx: number, directionDeg: number): void {
  const { widthPx, heightPx, rgb } = picture;
  const steps = Math.ceil(lengthPx) + 1;
  const cosine = Math.cos((directionDeg * Math.PI) / 180);
  const sine = Math.sin((directionDeg * Math.PI) / 180);
  const shifts = Array.from({ length: steps }, (_, i) => {
    const t = lengthPx * (i / (steps - 1) - 0.5);
    return [Math.round(t * cosine), Math.round(t * sine)] as const;
  });
  const source = rgb.slice();
  for (let row = 0, at = 0; row < heightPx; row++) {
    for (let column = 0; column < widthPx; column++) {
      for (let channel = 0; channel < 3; channel++, at++) {
        let sum = 0;
        for (const [dx, dy] of shifts) {
          const x = Math.min(widthPx - 1, Math.max(0, column + dx));
          const y = Math.min(heightPx - 1, Math.max(0, row + dy));
          sum += source[3 * (y * widthPx + x) + channel] as number;
        }
        rgb[at] = sum / steps;
      }
    }
  }
}

/**
 * A photo as planes of numbers: lightness and two opponent colours (red–green, yellow–blue), 0–255 scale,
 * row by row. Upright; `scale` is picture pixels per pixel of the full-resolution photo.
 */
export interface Picture {
  readonly widthPx: number;
  readonly heightPx: number;
  readonly planes: readonly [Float32Array, Float32Array, Float32Array];
  /** Picture px per photo px. */
  readonly scale: number;
}

/** Interleaved 8-bit RGB → picture. Lightness by Rec. 601 weights. */
export function pictureFromRgb(rgb: Uint8Array, widthPx: number, heightPx: number, scale: number): Picture {
  const n = widthPx * heightPx;
  const l = new Float32Array(n);
  const a = new Float32Array(n);
  const b = new Float32Array(n);
  for (let i = 0, j = 0; i < n; i++, j += 3) {
    const red = rgb[j] as number;
    const green = rgb[j + 1] as number;
    const blue = rgb[j + 2] as number;
    l[i] = 0.299 * red + 0.587 * green + 0.114 * blue;
    a[i] = (red - green) * 0.7;
    b[i] = ((red + green) / 2 - blue) * 0.7;
  }
  return { widthPx, heightPx, planes: [l, a, b], scale };
}

/** Mean over blocks of `factor` × `factor` pixels; a rest at the right and lower border is left out. */
export function shrink(picture: Picture, factor: number): Picture {
  if (factor <= 1) return picture;
  const w = Math.floor(picture.widthPx / factor);
  const h = Math.floor(picture.heightPx / factor);
  const planes = picture.planes.map((source) => {
    const out = new Float32Array(w * h);
    for (let y = 0; y < h; y++) {
      for (let dy = 0; dy < factor; dy++) {
        let from = (y * factor + dy) * picture.widthPx;
        for (let x = 0; x < w; x++) {
          let sum = 0;
          for (let dx = 0; dx < factor; dx++) sum += source[from++] as number;
          out[y * w + x] = (out[y * w + x] as number) + sum;
        }
      }
    }
    const norm = 1 / (factor * factor);
    for (let i = 0; i < out.length; i++) out[i] = (out[i] as number) * norm;
    return out;
  });
  return {
    widthPx: w,
    heightPx: h,
    planes: planes as [Float32Array, Float32Array, Float32Array],
    scale: picture.scale / factor,
  };
}

/** Bilinear value of one plane; points outside take the border's value. */
export function sampleAt(plane: Float32Array, widthPx: number, heightPx: number, xPx: number, yPx: number): number {
  const x = xPx < 0 ? 0 : xPx > widthPx - 1.001 ? widthPx - 1.001 : xPx;
  const y = yPx < 0 ? 0 : yPx > heightPx - 1.001 ? heightPx - 1.001 : yPx;
  const x0 = x | 0;
  const y0 = y | 0;
  const fx = x - x0;
  const fy = y - y0;
  const i = y0 * widthPx + x0;
  const top = (plane[i] as number) * (1 - fx) + (plane[i + 1] as number) * fx;
  const low = (plane[i + widthPx] as number) * (1 - fx) + (plane[i + widthPx + 1] as number) * fx;
  return top * (1 - fy) + low * fy;
}

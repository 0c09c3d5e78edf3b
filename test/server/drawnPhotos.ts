import sharp from 'sharp';

/**
 * A drawn photo of a bar broken along a helix: the gap follows x = r·asin(y/r)·tan θ, so that its true plane angle is
 * known. Plain shading across the bar; no more than tests of the service need.
 */
export async function brokenBarPng(
  options: { readonly planeAngleDeg?: number; readonly widthPx?: number; readonly seed?: number } = {},
): Promise<Buffer> {
  const { planeAngleDeg = 45, widthPx = 900, seed = 1 } = options;
  const heightPx = Math.round(widthPx * 0.6);
  const radius = widthPx / 9;
  const tan = Math.tan((planeAngleDeg * Math.PI) / 180);
  const pixels = Buffer.alloc(widthPx * heightPx);
  let state = seed >>> 0;
  const noise = (): number => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    return state / 2 ** 32 - 0.5;
  };
  for (let row = 0; row < heightPx; row++) {
    const y = heightPx / 2 - row;
    for (let column = 0; column < widthPx; column++) {
      const inBar = Math.abs(y) < radius;
      let grey = 40;
      if (inBar) {
        const s = radius * Math.asin(y / radius);
        const distance = column - widthPx / 2 - s * tan;
        grey = Math.abs(distance) < 8 ? 30 : 120 + 90 * Math.sqrt(1 - (y / radius) ** 2);
      }
      pixels[row * widthPx + column] = Math.max(0, Math.min(255, Math.round(grey + 6 * noise())));
    }
  }
  return sharp(pixels, { raw: { width: widthPx, height: heightPx, channels: 1 } })
    .png()
    .toBuffer();
}

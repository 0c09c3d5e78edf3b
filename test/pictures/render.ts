import { type Scene, SceneTracer } from './sceneTracer.ts';

/** Linear light, three floats a pixel, row by row. */
export interface LinearPicture {
  readonly widthPx: number;
  readonly heightPx: number;
  readonly rgb: Float32Array;
}

/** Pixels that differ from a neighbour by this factor in brightness are sampled again. */
const CONTRAST = 1.35;
const EXTRA_SAMPLES = [
  [-0.375, -0.125],
  [0.125, -0.375],
  [0.375, 0.125],
  [-0.125, 0.375],
] as const;

/** Renders the scene in linear light, with more samples where faces meet or brightness jumps. */
export function render(scene: Scene): LinearPicture {
  const { widthPx, heightPx } = scene.camera;
  const tracer = new SceneTracer(scene);
  const rgb = new Float32Array(3 * widthPx * heightPx);
  const faces = new Uint8Array(widthPx * heightPx);
  for (let row = 0, at = 0; row < heightPx; row++) {
    for (let column = 0; column < widthPx; column++, at++) {
      faces[at] = tracer.follow(column, row);
      rgb[3 * at] = tracer.red;
      rgb[3 * at + 1] = tracer.green;
      rgb[3 * at + 2] = tracer.blue;
    }
  }
  const again = edges(faces, rgb, widthPx, heightPx);
  for (let at = 0; at < again.length; at++) {
    if (again[at] === 0) continue;
    const column = at % widthPx;
    const row = (at - column) / widthPx;
    let red = rgb[3 * at] as number;
    let green = rgb[3 * at + 1] as number;
    let blue = rgb[3 * at + 2] as number;
    for (const [dx, dy] of EXTRA_SAMPLES) {
      tracer.follow(column + dx, row + dy);
      red += tracer.red;
      green += tracer.green;
      blue += tracer.blue;
    }
    const samples = EXTRA_SAMPLES.length + 1;
    rgb[3 * at] = red / samples;
    rgb[3 * at + 1] = green / samples;
    rgb[3 * at + 2] = blue / samples;
  }
  return { widthPx, heightPx, rgb };
}

function edges(faces: Uint8Array, rgb: Float32Array, widthPx: number, heightPx: number): Uint8Array {
  const marked = new Uint8Array(faces.length);
  const differ = (a: number, b: number): boolean => {
    if (faces[a] !== faces[b]) return true;
    const first = (rgb[3 * a + 1] as number) + 0.01;
    const second = (rgb[3 * b + 1] as number) + 0.01;
    return first > CONTRAST * second || second > CONTRAST * first;
  };
  for (let row = 0; row < heightPx; row++) {
    for (let column = 0; column < widthPx; column++) {
      const at = row * widthPx + column;
      if (column + 1 < widthPx && differ(at, at + 1)) {
        marked[at] = 1;
        marked[at + 1] = 1;
      }
      if (row + 1 < heightPx && differ(at, at + widthPx)) {
        marked[at] = 1;
        marked[at + widthPx] = 1;
      }
    }
  }
  return marked;
}

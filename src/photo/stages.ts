import type { GapEvidence } from './gapEvidence.ts';
import type { Picture } from './picture.ts';
import { type SpecimenFrame, type SurfacePoint, toPhoto } from './unroll.ts';
import type { UnrolledMap } from './unrolledMap.ts';

/** A stage of the measurement as a picture, interleaved RGB. */
export interface StagePicture {
  readonly widthPx: number;
  readonly heightPx: number;
  readonly rgb: Uint8Array;
}

type Colour = readonly [number, number, number];
const TRACE: Colour = [255, 157, 60];
const FIT: Colour = [70, 190, 255];
const EDGE: Colour = [143, 211, 255];

const byte = (v: number) => (v < 0 ? 0 : v > 255 ? 255 : Math.round(v));

function dot(stage: StagePicture, x: number, y: number, colour: Colour): void {
  const c = Math.round(x);
  const r = Math.round(y);
  if (c < 0 || r < 0 || c >= stage.widthPx || r >= stage.heightPx) return;
  stage.rgb.set(colour, 3 * (r * stage.widthPx + c));
}

function polyline(stage: StagePicture, points: readonly (readonly [number, number])[], colour: Colour): void {
  for (let i = 1; i < points.length; i++) {
    const [x0, y0] = points[i - 1] as readonly [number, number];
    const [x1, y1] = points[i] as readonly [number, number];
    const n = Math.max(1, Math.ceil(Math.hypot(x1 - x0, y1 - y0)));
    for (let k = 0; k <= n; k++) dot(stage, x0 + ((x1 - x0) * k) / n, y0 + ((y1 - y0) * k) / n, colour);
  }
}

/** The photo in grey with the specimen's edges and its trace. */
export function specimenStage(
  picture: Picture,
  frame: SpecimenFrame,
  stretch: { readonly fromX: number; readonly toX: number },
  trace: readonly SurfacePoint[],
): StagePicture {
  const stage = {
    widthPx: picture.widthPx,
    heightPx: picture.heightPx,
    rgb: new Uint8Array(3 * picture.planes[0].length),
  };
  picture.planes[0].forEach((v, i) => {
    stage.rgb.fill(byte(v), 3 * i, 3 * i + 3);
  });
  const at = (p: SurfacePoint): [number, number] => {
    const q = toPhoto(frame, p);
    return [q.xPx, q.yPx];
  };
  for (const side of [1, -1]) {
    polyline(
      stage,
      [at({ x: stretch.fromX, phi: (side * Math.PI) / 2 }), at({ x: stretch.toX, phi: (side * Math.PI) / 2 })],
      EDGE,
    );
  }
  polyline(stage, trace.map(at), TRACE);
  return stage;
}

/** The unrolled face, upper side up, with the trace and the fitted curve over it. */
export function faceStage(
  map: UnrolledMap,
  trace: readonly SurfacePoint[],
  curve: readonly SurfacePoint[],
): StagePicture {
  const stage = { widthPx: map.columns, heightPx: map.rows, rgb: new Uint8Array(3 * map.rows * map.columns) };
  for (let r = 0; r < map.rows; r++) {
    for (let c = 0; c < map.columns; c++) {
      const v = byte(map.planes[0][r * map.columns + c] as number);
      dot(stage, c, map.rows - 1 - r, [v, v, v]);
    }
  }
  const at = (p: SurfacePoint): [number, number] => [
    (p.x - map.firstX) / map.stepRadii,
    map.rows - 1 - (p.phi - map.firstPhi) / map.stepRadii,
  ];
  polyline(stage, curve.map(at), FIT);
  polyline(stage, trace.map(at), TRACE);
  return stage;
}

/** What looks like a gap: red across the rows, green along them. */
export function evidenceStage(map: UnrolledMap, evidence: GapEvidence, path: readonly SurfacePoint[]): StagePicture {
  const stage = { widthPx: map.columns, heightPx: map.rows, rgb: new Uint8Array(3 * map.rows * map.columns) };
  for (let r = 0; r < map.rows; r++) {
    for (let c = 0; c < map.columns; c++) {
      const i = r * map.columns + c;
      dot(stage, c, map.rows - 1 - r, [
        byte(45 * (evidence.across[i] as number)),
        byte(45 * (evidence.along[i] as number)),
        0,
      ]);
    }
  }
  polyline(
    stage,
    path.map((p): [number, number] => [
      (p.x - map.firstX) / map.stepRadii,
      map.rows - 1 - (p.phi - map.firstPhi) / map.stepRadii,
    ]),
    FIT,
  );
  return stage;
}

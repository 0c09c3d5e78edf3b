import { gapEvidence } from './gapEvidence.ts';
import { type Picture, sampleAt } from './picture.ts';
import { cheapestPath, stepCosts } from './tracePath.ts';
import type { SpecimenFrame } from './unroll.ts';
import type { UnrolledMap } from './unrolledMap.ts';

/** Heights looked at beyond an edge, in radii from the axis, and how far along the axis, radii. */
const FROM_HEIGHT = 1.06;
const TO_HEIGHT = 1.5;
const REACH = 1.2;

/**
 * Whether a gap that reaches the edge of a candidate runs on beyond it: then the edge is not the specimen's. Cost a row of
 * the cheapest continuation on the plane of the photo, 0.03 (runs on clearly) to 1 (ends at the edge).
 * @param atX where the gap reaches the edge, radii along the axis
 * @param side +1 upper edge, −1 lower edge
 */
export function continuationCost(
  picture: Picture,
  frame: SpecimenFrame,
  atX: number,
  side: 1 | -1,
  stepRadii: number,
): number {
  const rows = Math.round((TO_HEIGHT - FROM_HEIGHT) / stepRadii) + 1;
  const columns = Math.round((2 * REACH) / stepRadii) + 1;
  if (rows < 4) return 1;
  const n = rows * columns;
  const planes: [Float32Array, Float32Array, Float32Array] = [
    new Float32Array(n),
    new Float32Array(n),
    new Float32Array(n),
  ];
  const seen = new Uint8Array(n);
  const { widthPx: w, heightPx: h } = picture;
  for (let r = 0; r < rows; r++) {
    for (let c = 0; c < columns; c++) {
      const along = (atX - REACH + c * stepRadii) * frame.radiusPx;
      const up = side * (FROM_HEIGHT + r * stepRadii) * (frame.radiusPx + frame.taper * along);
      const x = frame.originPx.xPx + along * frame.alongX + up * frame.alongY;
      const y = frame.originPx.yPx + along * frame.alongY - up * frame.alongX;
      if (x < 0 || y < 0 || x > w - 1 || y > h - 1) continue;
      const i = r * columns + c;
      seen[i] = 1;
      for (const k of [0, 1, 2] as const) (planes[k] as Float32Array)[i] = sampleAt(picture.planes[k], w, h, x, y);
    }
  }
  const map: UnrolledMap = { frame, rows, columns, stepRadii, firstPhi: 0, firstX: 0, planes, seen };
  const costs = stepCosts(gapEvidence(map, [3, 5, 9]), rows, columns);
  const blocked = new Uint8Array(n);
  const middle = (columns - 1) / 2;
  const start = Math.round(0.2 / stepRadii);
  for (let c = 0; c < columns; c++) if (Math.abs(c - middle) > start) blocked[c] = 1;
  const path = cheapestPath(costs, blocked);
  return path === null ? 1 : Math.min(1, path.cost / rows);
}

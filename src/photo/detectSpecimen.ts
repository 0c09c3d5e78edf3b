import { type AlignedCells, alignCells } from './alignedCells.ts';
import { findEdges, findLines } from './lines.ts';
import { type AlignedEdge, findParallelEdges } from './parallelEdges.ts';
import { type Picture, shrink } from './picture.ts';
import { findPairs, findWiderPairs, type SpecimenPair } from './specimenPairs.ts';
import type { SpecimenFrame } from './unroll.ts';

/** A place where a specimen may lie, in px of the picture given. */
export interface SpecimenHypothesis {
  readonly frame: SpecimenFrame;
  /** Stretch along the axis over which both edges were seen, px from the frame's origin. */
  readonly fromPx: number;
  readonly toPx: number;
  readonly score: number;
  readonly terms: Readonly<Record<string, number>>;
  /** Hypotheses that contain this one, bounded by edges further out. */
  readonly wider: () => SpecimenHypothesis[];
}

const LONG_SIDE_LINES = 800;
const LONG_SIDE_CELLS = 400;

/**
 * Places where a specimen may lie, best first: directions from the straight edges of the photo, then parallel
 * edges along each direction, then pairs of them.
 */
export function detectSpecimens(picture: Picture, most: number): SpecimenHypothesis[] {
  const longSide = Math.max(picture.widthPx, picture.heightPx);
  const forLines = shrink(picture, Math.max(1, Math.round(longSide / LONG_SIDE_LINES)));
  const forCells = shrink(picture, Math.max(1, Math.round(longSide / LONG_SIDE_CELLS)));
  const lines = findLines(findEdges(forLines), forLines.widthPx, forLines.heightPx, 24, 18);
  const directions: number[] = [];
  for (const line of lines) {
    const along = (line.normal + Math.PI / 2) % Math.PI;
    const known = directions.some((d) => {
      const t = Math.abs(d - along);
      return Math.min(t, Math.PI - t) < 0.03;
    });
    if (!known) directions.push(along);
  }
  const toPicture = picture.scale / forCells.scale;
  const found: SpecimenHypothesis[] = [];
  for (const direction of directions.slice(0, 5)) {
    const grid = alignCells(forCells, direction, 10, 0.75);
    const edges = findParallelEdges(grid, 0.05, 40);
    for (const pair of findPairs(grid, edges, 24)) {
      found.push(hypothesisOf(pair, grid, edges, toPicture));
    }
  }
  found.sort((a, b) => b.score - a.score);
  const kept: SpecimenHypothesis[] = [];
  for (const h of found) {
    if (kept.length >= most) break;
    if (!kept.some((k) => nearlySame(k, h))) kept.push(h);
  }
  return kept;
}

function hypothesisOf(
  pair: SpecimenPair,
  grid: AlignedCells,
  edges: readonly AlignedEdge[],
  k: number,
): SpecimenHypothesis {
  const fromAlong = grid.firstAlong + (pair.fromCell - 0.5) * grid.cellPx;
  const toAlong = grid.firstAlong + (pair.toCell + 0.5) * grid.cellPx;
  const middle = (fromAlong + toAlong) / 2;
  const top = pair.upper.across + pair.upper.slope * middle;
  const low = pair.lower.across + pair.lower.slope * middle;
  const lean = Math.atan((pair.upper.slope + pair.lower.slope) / 2);
  const alongX = grid.alongX * Math.cos(lean) + grid.alongY * Math.sin(lean);
  const alongY = grid.alongY * Math.cos(lean) - grid.alongX * Math.sin(lean);
  const across = (top + low) / 2;
  const x = grid.centreX + middle * grid.alongX + across * grid.alongY;
  const y = grid.centreY + middle * grid.alongY - across * grid.alongX;
  const radiusPx = ((top - low) / 2) * k;
  const half = ((toAlong - fromAlong) / 2) * k;
  return {
    frame: {
      // Pixel centres: (i + ½)·k − ½.
      originPx: { xPx: (x + 0.5) * k - 0.5, yPx: (y + 0.5) * k - 0.5 },
      alongX,
      alongY,
      radiusPx,
      taper: (pair.upper.slope - pair.lower.slope) / 2,
      cameraDistanceRadii: Number.POSITIVE_INFINITY,
      cameraAlongRadii: 0,
    },
    fromPx: -half,
    toPx: half,
    score: pair.score,
    terms: pair.terms,
    wider: () => findWiderPairs(grid, edges, pair, 2).map((p) => hypothesisOf(p, grid, edges, k)),
  };
}

function nearlySame(a: SpecimenHypothesis, b: SpecimenHypothesis): boolean {
  const dx = b.frame.originPx.xPx - a.frame.originPx.xPx;
  const dy = b.frame.originPx.yPx - a.frame.originPx.yPx;
  const up = Math.abs(dx * a.frame.alongY - dy * a.frame.alongX);
  const turn = Math.abs(a.frame.alongX * b.frame.alongY - a.frame.alongY * b.frame.alongX);
  const size = a.frame.radiusPx;
  return turn < 0.06 && up < 0.08 * size && Math.abs(a.frame.radiusPx - b.frame.radiusPx) < 0.08 * size;
}

/** The hypothesis in pixels of a picture `factor` times as large. */
export function scaleFrame(frame: SpecimenFrame, factor: number): SpecimenFrame {
  return {
    ...frame,
    originPx: { xPx: (frame.originPx.xPx + 0.5) * factor - 0.5, yPx: (frame.originPx.yPx + 0.5) * factor - 0.5 },
    radiusPx: frame.radiusPx * factor,
  };
}

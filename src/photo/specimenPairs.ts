import { type AlignedCells, bandColour } from './alignedCells.ts';
import type { AlignedEdge } from './parallelEdges.ts';

/** Two nearly parallel edges that may be the two sides of a specimen. Positions in px of the detection picture. */
export interface SpecimenPair {
  readonly upper: AlignedEdge;
  readonly lower: AlignedEdge;
  readonly fromCell: number;
  readonly toCell: number;
  readonly widthPx: number;
  /** Larger is better; see {@link scorePair}. */
  readonly score: number;
  /** The parts of the score, for explanation. */
  readonly terms: Readonly<Record<string, number>>;
}

const MINIMUM_WIDTH_PX = 9;

/**
 * All pairs of edges that could bound a specimen, best first.
 *
 * What speaks for a pair: both edges strong along the same stretch; outside of both the same background (a
 * shadow is the background's hue, only darker); inside different from outside on both sides. What speaks
 * against: an inner edge beyond which the pair holds only darkened background (specimen and its shadow taken
 * together), outsides of different hue (half a specimen up to its highlight).
 */
export function findPairs(grid: AlignedCells, edges: readonly AlignedEdge[], most: number): SpecimenPair[] {
  const couples: { upper: AlignedEdge; lower: AlignedEdge; span: Span; bound: number }[] = [];
  for (const upper of edges) {
    for (const lower of edges) {
      if (upper === lower) continue;
      const span = spanOf(grid, upper, lower);
      if (span === null) continue;
      const sure = Object.values(edgeTerms(grid, upper, lower, span)).reduce((a, b) => a + b, 0);
      couples.push({ upper, lower, span, bound: sure + MOST_COLOUR_TERMS });
    }
  }
  // Best bound first: once the bound falls under the last place, no further couple can enter.
  couples.sort((a, b) => b.bound - a.bound);
  const pairs: SpecimenPair[] = [];
  for (const { upper, lower, span, bound } of couples) {
    const last = pairs[most - 1];
    if (last !== undefined && bound <= last.score) break;
    const pair = scorePair(grid, edges, upper, lower, span);
    if (pair === null || (last !== undefined && pair.score <= last.score)) continue;
    let at = pairs.length;
    while (at > 0 && (pairs[at - 1] as SpecimenPair).score < pair.score) at -= 1;
    pairs.splice(at, 0, pair);
    if (pairs.length > most) pairs.pop();
  }
  return pairs;
}

/** Pairs that contain a pair, with an edge further out on one side or on both: the `reach` nearest ones on each side. */
export function findWiderPairs(
  grid: AlignedCells,
  edges: readonly AlignedEdge[],
  pair: SpecimenPair,
  reach: number,
): SpecimenPair[] {
  const middle = grid.firstAlong + ((pair.fromCell + pair.toCell) / 2) * grid.cellPx;
  const at = (e: AlignedEdge) => e.across + e.slope * middle;
  const most = 1.8 * pair.widthPx;
  const clear = (e: AlignedEdge) => e.strength / Math.sqrt(e.toCell - e.fromCell + 1) > 0.7;
  const above = edges
    .filter((e) => at(e) > at(pair.upper) + 1 && at(e) < at(pair.upper) + most && clear(e))
    .sort((a, b) => at(a) - at(b));
  const below = edges
    .filter((e) => at(e) < at(pair.lower) - 1 && at(e) > at(pair.lower) - most && clear(e))
    .sort((a, b) => at(b) - at(a));
  const out: SpecimenPair[] = [];
  for (const upper of [pair.upper, ...above.slice(0, reach)]) {
    for (const lower of [pair.lower, ...below.slice(0, reach)]) {
      if (upper === pair.upper && lower === pair.lower) continue;
      const wider = pairOf(grid, edges, upper, lower);
      if (wider !== null) out.push(wider);
    }
  }
  return out;
}

function pairOf(
  grid: AlignedCells,
  edges: readonly AlignedEdge[],
  upper: AlignedEdge,
  lower: AlignedEdge,
): SpecimenPair | null {
  const span = spanOf(grid, upper, lower);
  return span === null ? null : scorePair(grid, edges, upper, lower, span);
}

/** Where both edges run side by side, and how far apart. */
interface Span {
  readonly fromCell: number;
  readonly toCell: number;
  readonly widthPx: number;
}

function spanOf(grid: AlignedCells, upper: AlignedEdge, lower: AlignedEdge): Span | null {
  const fromCell = Math.max(upper.fromCell, lower.fromCell);
  const toCell = Math.min(upper.toCell, lower.toCell);
  if (toCell - fromCell < 2) return null;
  const at = (cell: number) => grid.firstAlong + cell * grid.cellPx;
  const width = (cell: number) => upper.across - lower.across + (upper.slope - lower.slope) * at(cell);
  const w0 = width(fromCell);
  const w1 = width(toCell);
  const widthPx = (w0 + w1) / 2;
  if (!(widthPx >= MINIMUM_WIDTH_PX) || widthPx > 0.75 * grid.rows * grid.stepPx) return null;
  const lengthPx = (toCell - fromCell + 1) * grid.cellPx;
  if (Math.abs(w1 - w0) > 0.05 * lengthPx || Math.min(w0, w1) < 0.6 * widthPx) return null;
  return lengthPx < 0.9 * widthPx ? null : { fromCell, toCell, widthPx };
}

/** Strength of an edge a cell, noise units. */
const perCell = (e: AlignedEdge) => Math.min(8, e.strength / Math.sqrt(e.toCell - e.fromCell + 1));

/** The terms of the score that need no colours. */
function edgeTerms(grid: AlignedCells, upper: AlignedEdge, lower: AlignedEdge, span: Span) {
  const s1 = perCell(upper);
  const s2 = perCell(lower);
  const cells = span.toCell - span.fromCell + 1;
  return {
    edges: 1.2 * Math.log(0.3 + Math.min(s1, s2)) + 0.4 * Math.log(0.3 + Math.max(s1, s2)),
    length: 0.9 * Math.min(1.6, Math.log(((cells * grid.cellPx) / span.widthPx + 1) / 2)),
    sharp: 0.8 * Math.min(1, Math.min(upper.sharpness, lower.sharpness)),
    width: 0.25 * Math.log(span.widthPx / 20),
  };
}

const MOST_UNLIKE = 1.5;
const UNLIKE_WEIGHT = 0.8;
/** What the colours can add at the most: unlike its surroundings, and shaded as a round bar is. */
const MOST_COLOUR_TERMS = UNLIKE_WEIGHT * MOST_UNLIKE + 1;

type Colour = Float64Array;

/** Difference of two colours in units where 1 is clearly seen: lightness steps of 12, hue steps of 6. */
const lightnessStep = (a: Colour, b: Colour) => ((a[0] as number) - (b[0] as number)) / 12;
function hueStep(a: Colour, b: Colour): number {
  // Chroma in proportion to lightness does not change when light is taken away.
  const la = Math.max(8, a[0] as number);
  const lb = Math.max(8, b[0] as number);
  const scale = Math.min(la, lb) / 6;
  return (
    scale * Math.hypot((a[1] as number) / la - (b[1] as number) / lb, (a[2] as number) / la - (b[2] as number) / lb)
  );
}
/** Likeness of two patches of background, one of which may lie in shadow. 0 = the same. */
const backgroundStep = (a: Colour, b: Colour) =>
  Math.hypot(Math.min(0.4, 0.15 * Math.abs(lightnessStep(a, b))), hueStep(a, b));
const fullStep = (a: Colour, b: Colour) => Math.hypot(lightnessStep(a, b), hueStep(a, b));

function meanBand(
  grid: AlignedCells,
  line: (cell: number) => number,
  from: number,
  to: number,
  cells: readonly number[],
): Colour | null {
  const sum = new Float64Array(3);
  const one = new Float64Array(3);
  let n = 0;
  for (const cell of cells) {
    const y = line(cell);
    if (!bandColour(grid, cell, y + Math.min(from, to), y + Math.max(from, to), one)) continue;
    for (let k = 0; k < 3; k++) sum[k] = (sum[k] as number) + (one[k] as number);
    n += 1;
  }
  if (n < 0.4 * cells.length) return null;
  for (let k = 0; k < 3; k++) sum[k] = (sum[k] as number) / n;
  return sum;
}

function scorePair(
  grid: AlignedCells,
  edges: readonly AlignedEdge[],
  upper: AlignedEdge,
  lower: AlignedEdge,
  span: Span,
): SpecimenPair | null {
  const { fromCell, toCell, widthPx } = span;
  const n = toCell - fromCell + 1;
  const cells = Array.from({ length: Math.min(n, 14) }, (_, i) =>
    Math.round(fromCell + ((i + 0.5) * n) / Math.min(n, 14) - 0.5),
  );
  const at = (cell: number) => grid.firstAlong + cell * grid.cellPx;
  const top = (cell: number) => upper.across + upper.slope * at(cell);
  const low = (cell: number) => lower.across + lower.slope * at(cell);
  const w = widthPx;
  const skip = Math.max(1.2, 0.05 * w);
  const near = Math.max(3, 0.22 * w);
  const in1 = meanBand(grid, top, -skip, -near, cells);
  const in2 = meanBand(grid, low, skip, near, cells);
  const mid = meanBand(grid, (c) => (top(c) + low(c)) / 2, -0.15 * w, 0.15 * w, cells);
  const out1 = meanBand(grid, top, skip, near, cells);
  const out2 = meanBand(grid, low, -skip, -near, cells);
  const far1 = meanBand(grid, top, near, 0.9 * w, cells) ?? out1;
  const far2 = meanBand(grid, low, -near, -0.9 * w, cells) ?? out2;
  if (in1 === null || in2 === null || mid === null) return null;
  if (out1 === null && out2 === null) return null;

  // A side cut off by the photo's border cannot be compared; it counts as unlike.
  const combos: number[] = [];
  for (const a of [out1, far1])
    for (const b of [out2, far2]) if (a !== null && b !== null) combos.push(backgroundStep(a, b));
  const outside = combos.length > 0 ? Math.min(...combos) : 3;

  const weaker = Math.min(perCell(upper), perCell(lower));

  const side1 = out1 === null ? 0 : fullStep(in1, out1);
  const side2 = out2 === null ? 0 : fullStep(in2, out2);
  const unlike = Math.min(MOST_UNLIKE, side1, side2);

  // The ground further off: beside the specimen lies background, darkened on one side at the most.
  const ground1 = meanBand(grid, top, 1.1 * w, 3 * w, cells) ?? far1;
  const ground2 = meanBand(grid, low, -1.1 * w, -3 * w, cells) ?? far2;
  const apart1 = out1 === null || ground1 === null ? 0 : fullStep(out1, ground1);
  const apart2 = out2 === null || ground2 === null ? 0 : fullStep(out2, ground2);
  const brighter = (a: Colour | null, b: Colour | null) =>
    a === null || b === null ? 0 : Math.max(0, lightnessStep(a, b));
  const glare = Math.max(brighter(out1, ground1), brighter(out2, ground2));

  // Specimen and shadow together: an inner edge, and beyond it only darkened background.
  let shadow = 0;
  const ground =
    far1 !== null && far2 !== null ? ((far1[0] as number) > (far2[0] as number) ? far1 : far2) : (far1 ?? far2);
  for (const inner of edges) {
    if (inner === upper || inner === lower) continue;
    const overlap = Math.min(inner.toCell, toCell) - Math.max(inner.fromCell, fromCell) + 1;
    if (overlap < 0.6 * n) continue;
    const strength = perCell(inner);
    if (strength < 0.6 * weaker || strength < 1) continue;
    const middle = (fromCell + toCell) / 2;
    const position = (inner.across + inner.slope * at(middle) - low(middle)) / w;
    if (position < 0.08 || position > 0.92 || ground === null) continue;
    const line = (c: number) => inner.across + inner.slope * at(c);
    for (const side of [1, -1] as const) {
      const room = side === 1 ? (1 - position) * w : position * w;
      const strip = meanBand(grid, line, side * Math.max(1, 0.12 * room), side * 0.88 * room, cells);
      if (strip === null) continue;
      const darker = (strip[0] as number) < (ground[0] as number) - 4;
      const likeGround = hueStep(strip, ground);
      const other = meanBand(grid, line, -side * Math.max(1, 0.05 * w), -side * 0.3 * w, cells);
      const differs = other === null ? 0 : fullStep(strip, other);
      if (darker && likeGround < 0.8 && differs > 0.8)
        // The side of the bar turned from the light is dark too, but passes into the lit side softly.
        shadow = Math.max(
          shadow,
          Math.min(1, differs / 2) *
            Math.min(1, 1.25 * (1 - likeGround)) *
            Math.max(0.3, Math.min(1, (inner.sharpness - 0.3) / 0.12)),
        );
    }
  }
  // A round bar is shaded across, a flat strip (a rule, a label, a shadow on the ground) is not.
  const shades: number[] = [];
  for (let k = -3; k <= 3; k++) {
    const band = meanBand(grid, (c) => (top(c) + low(c)) / 2 + (k / 4) * (w / 2), -0.06 * w, 0.06 * w, cells);
    if (band !== null) shades.push(band[0] as number);
  }
  const mean = shades.reduce((a, b) => a + b, 0) / Math.max(1, shades.length);
  const shading = Math.sqrt(shades.reduce((a, b) => a + (b - mean) ** 2, 0) / Math.max(1, shades.length)) / (mean + 10);
  const terms = {
    ...edgeTerms(grid, upper, lower, span),
    round: Math.min(1, shading / 0.03),
    outside: -1.1 * Math.min(3, outside),
    unlike: UNLIKE_WEIGHT * unlike,
    shadow: -1.2 * shadow,
    nested: -1 * Math.min(1.2, Math.min(apart1, apart2)),
    glare: -0.5 * Math.min(2, glare),
  };
  const score = Object.values(terms).reduce((a, b) => a + b, 0);
  return { upper, lower, fromCell, toCell, widthPx, score, terms };
}

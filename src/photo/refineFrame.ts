import { fitLinear, medianOf } from './leastSquares.ts';
import { type Picture, sampleAt } from './picture.ts';
import type { SpecimenFrame } from './unroll.ts';

/** A specimen frame fitted to both edges, with how well it is known. Px of the picture it was fitted in. */
export interface RefinedFrame {
  readonly frame: SpecimenFrame;
  readonly axisStandardUncertaintyDeg: number;
  readonly radiusRelativeUncertainty: number;
  readonly centreUncertaintyRadii: number;
  readonly taperUncertainty: number;
  /** Share of the places looked at where the edge was found near the line, upper and lower side. */
  readonly found: readonly [number, number];
  /** Mean colour step at the edges over the scatter along them. */
  readonly contrast: readonly [number, number];
}

interface EdgePoint {
  readonly along: number;
  readonly up: number;
  readonly strength: number;
}

/**
 * Fits the two edges at sub-pixel: across many places along the specimen the steepest colour change near the
 * expected edge is located (parabola through the three largest differences), then a robust line through them.
 * @param start frame known to a few px
 * @param fromPx, toPx stretch along the axis to use, px from the frame's origin
 * @param reachPx how far from the expected edge to look
 */
export function refineFrame(
  picture: Picture,
  start: SpecimenFrame,
  fromPx: number,
  toPx: number,
  reachPx: number,
): RefinedFrame | null {
  const places = Math.max(12, Math.min(90, Math.round((toPx - fromPx) / 3)));
  const smear = Math.max(3, Math.min(16, (toPx - fromPx) / places));
  const upper = edgePoints(picture, start, 1, fromPx, toPx, places, smear, reachPx);
  const lower = edgePoints(picture, start, -1, fromPx, toPx, places, smear, reachPx);
  const fitU = fitEdge(upper);
  const fitL = fitEdge(lower);
  if (fitU === null || fitL === null) return null;
  const middle = (fromPx + toPx) / 2;
  const at = (f: EdgeFit, along: number) => f.offset + f.slope * along;
  const taper = (fitU.slope - fitL.slope) / 2;
  const lean = (fitU.slope + fitL.slope) / 2;
  const centre = (at(fitU, 0) + at(fitL, 0)) / 2;
  const radius = (at(fitU, 0) - at(fitL, 0)) / 2;
  if (!(radius > 2)) return null;
  const turn = Math.atan(lean);
  // "Up" is (alongY, −alongX) in the photo, so leaning up turns the direction towards it.
  const alongX = start.alongX * Math.cos(turn) + start.alongY * Math.sin(turn);
  const alongY = start.alongY * Math.cos(turn) - start.alongX * Math.sin(turn);
  const frame: SpecimenFrame = {
    ...start,
    originPx: { xPx: start.originPx.xPx + centre * start.alongY, yPx: start.originPx.yPx - centre * start.alongX },
    alongX,
    alongY,
    radiusPx: radius * Math.cos(turn),
    taper,
  };
  const uSlope = Math.hypot(fitU.slopeU, fitL.slopeU) / 2;
  const uOffset = Math.hypot(fitU.offsetU, fitL.offsetU) / 2;
  const uMiddle = Math.hypot(uOffset, uSlope * Math.abs(middle) * 0.2);
  return {
    frame,
    axisStandardUncertaintyDeg: Math.max(0.03, (uSlope * 180) / Math.PI),
    radiusRelativeUncertainty: Math.max(0.3 / radius, uMiddle / radius),
    centreUncertaintyRadii: Math.max(0.3 / radius, uMiddle / radius),
    taperUncertainty: Math.max(1e-4, uSlope),
    found: [fitU.found, fitL.found],
    contrast: [fitU.contrast, fitL.contrast],
  };
}

function edgePoints(
  picture: Picture,
  frame: SpecimenFrame,
  side: 1 | -1,
  fromPx: number,
  toPx: number,
  places: number,
  smear: number,
  reachPx: number,
): EdgePoint[] {
  const step = 0.5;
  const samples = Math.round((2 * reachPx) / step) + 1;
  const margin = 6;
  const n = samples + 2 * margin;
  const profile = [new Float64Array(n), new Float64Array(n), new Float64Array(n)] as const;
  const points: EdgePoint[] = [];
  const { widthPx: w, heightPx: h } = picture;
  for (let place = 0; place < places; place++) {
    const along = fromPx + ((place + 0.5) * (toPx - fromPx)) / places;
    const radius = frame.radiusPx + frame.taper * along;
    let whole = true;
    for (let i = 0; i < n && whole; i++) {
      const up = side * radius + (i - margin - (samples - 1) / 2) * step;
      let s0 = 0;
      let s1 = 0;
      let s2 = 0;
      for (let k = -2; k <= 2; k++) {
        const a = along + (k * smear) / 5;
        const x = frame.originPx.xPx + a * frame.alongX + up * frame.alongY;
        const y = frame.originPx.yPx + a * frame.alongY - up * frame.alongX;
        if (x < 0 || y < 0 || x > w - 1 || y > h - 1) {
          whole = false;
          break;
        }
        s0 += sampleAt(picture.planes[0], w, h, x, y);
        s1 += sampleAt(picture.planes[1], w, h, x, y);
        s2 += sampleAt(picture.planes[2], w, h, x, y);
      }
      profile[0][i] = s0 / 5;
      profile[1][i] = s1 / 5;
      profile[2][i] = s2 / 5;
    }
    if (!whole) continue;
    const reach = 3;
    const change = (i: number) => {
      let sum = 0;
      for (const p of profile) {
        const d =
          ((p[i + 1] as number) +
            (p[i + 2] as number) +
            (p[i + reach] as number) -
            (p[i - 1] as number) -
            (p[i - 2] as number) -
            (p[i - reach] as number)) /
          3;
        sum += d * d;
      }
      return Math.sqrt(sum);
    };
    let best = -1;
    let bestValue = 0;
    for (let i = margin; i < margin + samples; i++) {
      const off = (i - margin - (samples - 1) / 2) / ((samples - 1) / 2);
      const value = change(i) * (1 - 0.35 * off * off);
      if (value > bestValue) {
        bestValue = value;
        best = i;
      }
    }
    if (best < 0) continue;
    const a = change(best - 1);
    const b = change(best);
    const c = change(best + 1);
    const curve = a + c - 2 * b;
    const shift = curve < 0 ? Math.max(-1, Math.min(1, (a - c) / (2 * curve))) : 0;
    points.push({ along, up: side * radius + (best + shift - margin - (samples - 1) / 2) * step, strength: b });
  }
  return points;
}

interface EdgeFit {
  readonly offset: number;
  readonly slope: number;
  readonly offsetU: number;
  readonly slopeU: number;
  readonly found: number;
  readonly contrast: number;
}

function fitEdge(points: readonly EdgePoint[]): EdgeFit | null {
  if (points.length < 6) return null;
  const ones = Float64Array.from(points, () => 1);
  const along = Float64Array.from(points, (p) => p.along);
  const fit = fitLinear(
    [ones, along],
    Float64Array.from(points, (p) => p.up),
    { huber: 1.5 },
  );
  if (fit === null) return null;
  const limit = Math.max(0.8, 2.5 * fit.robustSigma);
  const near = points.map((_, i) => Math.abs(fit.residuals[i] as number) <= limit);
  const good = points.filter((_, i) => near[i]);
  if (good.length < 5) return null;
  const again = fitLinear(
    [Float64Array.from(good, () => 1), Float64Array.from(good, (p) => p.along)],
    Float64Array.from(good, (p) => p.up),
  );
  if (again === null) return null;
  const sigma = Math.max(0.1, again.rms);
  const strengths = Float64Array.from(good, (p) => p.strength);
  const middle = medianOf(strengths);
  const spread = medianOf(strengths.map((v) => Math.abs(v - middle)));
  return {
    offset: again.coefficients[0] as number,
    slope: again.coefficients[1] as number,
    offsetU: Math.sqrt(again.inverseNormal[0]?.[0] ?? 0) * sigma,
    slopeU: Math.sqrt(again.inverseNormal[1]?.[1] ?? 0) * sigma,
    found: good.length / points.length,
    contrast: middle / Math.max(0.5, spread),
  };
}

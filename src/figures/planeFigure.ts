import { scaleLinear } from 'd3-scale';
import { line } from 'd3-shape';
import { normalStressMPa, shearStressMPa } from '../mechanics/planes.ts';
import type { PredictedPlaneName } from '../mechanics/stressState.ts';
import type { Assessment, CellProbability } from '../verdict/model.ts';
import { element, escapeXml, FIGURE_FONT, px } from './svgText.ts';

/** The reading a figure shows: what was compared with the planes. */
export interface FigureReading {
  readonly planeAngleDeg: number;
  readonly expandedUncertaintyDeg: number;
  readonly planeTiltDeg: number | null;
  readonly planeTiltExpandedUncertaintyDeg?: number | null | undefined;
}

export interface PlaneFigureOptions {
  /** CSS px; the figure scales with its viewBox. */
  readonly widthPx?: number;
  readonly heightPx?: number;
  /** Said to those who do not see the figure. */
  readonly title?: string;
}

const INK = '#17222e';
const SOFT = '#5a6a79';
const NORMAL = '#1f5fa8';
const SHEAR = '#b35a00';
const BAND = '#2b7a4b';

const PLANE_LABEL: Readonly<Record<PredictedPlaneName, string>> = {
  tension: 'tension plane',
  compression: 'compression plane',
  'shear-transverse': 'shear plane',
  'shear-longitudinal': 'shear plane',
};

const degrees = (value: number, digits = 1): string => `${value.toFixed(digits).replace('-', '−')}°`;

/** A ±90° axis: the angle is axial, so a cell that crosses the end comes back in at the other. */
function stretches(fromDeg: number, toDeg: number): [number, number][] {
  const from = fromDeg < -90 ? fromDeg + 180 : fromDeg;
  const to = toDeg < -90 ? toDeg + 180 : toDeg;
  if (to - from >= 180) return [[-90, 90]];
  if (from <= to && to <= 90) return [[from, to]];
  const end = to > 90 ? to - 180 : to;
  return [
    [from, 90],
    [-90, end],
  ];
}

/**
 * Normal and shear stress on every plane θ, the predicted planes with the cells of the decision rule, and the measured
 * angle with its uncertainty band: one look says which plane broke. SVG text; no scripts, no inline styles.
 * @param reading null while nothing is measured
 */
export function planeFigure(
  assessment: Assessment,
  reading: FigureReading | null,
  options: PlaneFigureOptions = {},
): string {
  const width = options.widthPx ?? 640;
  const height = options.heightPx ?? 330;
  const left = 62;
  const right = width - 16;
  const top = 54;
  const bottom = height - 78;
  const stress = assessment.planesFor;
  const angles = Array.from({ length: 181 }, (_, i) => i - 90);
  const curves = {
    normal: angles.map((a) => normalStressMPa(stress, a)),
    shear: angles.map((a) => shearStressMPa(stress, a)),
  };
  const most = Math.max(1e-9, ...curves.normal.map(Math.abs), ...curves.shear.map(Math.abs));
  const unitless = assessment.stress === null;
  const x = scaleLinear().domain([-90, 90]).range([left, right]);
  const y = scaleLinear()
    .domain([-1.08 * most, 1.08 * most])
    .range([bottom, top]);
  const text = (
    at: { x: number; y: number },
    content: string,
    more: Readonly<Record<string, string | number>> = {},
  ): string => element('text', { x: at.x, y: at.y, fill: INK, ...more }, escapeXml(content));
  const parts: string[] = [];

  const statement = assessment.statement;
  const cells: readonly CellProbability[] = statement?.cells ?? [];
  // The tilt of a flat break has no sign: its cells stand on both sides.
  const bothSides = statement?.comparedQuantity === 'planeTilt';
  cells.forEach((cell, i) => {
    const own = stretches(cell.fromDeg, cell.toDeg);
    for (const [from, to] of bothSides ? [...own, ...own.map(([a, b]): [number, number] => [-b, -a])] : own) {
      parts.push(
        element('rect', {
          x: x(from),
          y: top,
          width: x(to) - x(from),
          height: bottom - top,
          fill: i % 2 === 0 ? '#f0f3f6' : '#ffffff',
        }),
      );
    }
  });

  for (const tick of y.ticks(5)) {
    parts.push(
      element('path', {
        d: `M${left} ${px(y(tick))}H${right}`,
        stroke: tick === 0 ? SOFT : '#d6dde4',
        'stroke-width': 1,
      }),
    );
    if (!unitless || Math.abs(tick) <= 1.001) {
      parts.push(
        text({ x: left - 6, y: y(tick) + 4 }, String(tick).replace('-', '−'), {
          'text-anchor': 'end',
          'font-size': 11,
        }),
      );
    }
  }
  for (const tick of [-90, -67.5, -45, -22.5, 0, 22.5, 45, 67.5, 90]) {
    const main = tick % 45 === 0;
    parts.push(element('path', { d: `M${px(x(tick))} ${bottom}v${main ? 6 : 3}`, stroke: SOFT, 'stroke-width': 1 }));
    if (main) {
      parts.push(text({ x: x(tick), y: bottom + 19 }, degrees(tick, 0), { 'text-anchor': 'middle', 'font-size': 11 }));
    }
  }

  for (const plane of assessment.planes) {
    const at = plane.planeAngleDeg;
    const places = at >= 89.999 ? [-90, 90] : [at];
    for (const place of places) {
      parts.push(
        element('path', {
          d: `M${px(x(place))} ${top}V${bottom}`,
          stroke: INK,
          'stroke-width': 1,
          'stroke-dasharray': '2 3',
        }),
      );
    }
    const place = places[places.length - 1] as number;
    const anchor = place > 75 ? 'end' : place < -75 ? 'start' : 'middle';
    parts.push(
      text({ x: x(place), y: top - 20 }, PLANE_LABEL[plane.plane], { 'text-anchor': anchor, 'font-size': 11 }),
      text({ x: x(place), y: top - 7 }, degrees(at), { 'text-anchor': anchor, 'font-size': 11, fill: SOFT }),
    );
  }

  const path = (values: readonly number[]) =>
    line<number>()
      .x((_, i) => x(angles[i] as number))
      .y((v) => y(v))
      .digits(2)(values) ?? '';
  parts.push(
    element('path', { d: path(curves.normal), fill: 'none', stroke: NORMAL, 'stroke-width': 2.4 }),
    element('path', {
      d: path(curves.shear),
      fill: 'none',
      stroke: SHEAR,
      'stroke-width': 2.4,
      'stroke-dasharray': '7 4',
    }),
  );

  if (reading !== null)
    parts.push(...measuredBand(reading, statement?.comparedQuantity ?? 'planeAngle', x, top, bottom));

  const unit = unitless ? '(share of the shear stress)' : 'MPa';
  parts.push(
    element('path', { d: `M${left} ${top}V${bottom}H${right}V${top}Z`, fill: 'none', stroke: SOFT, 'stroke-width': 1 }),
    text({ x: left, y: 16 }, `stress on the plane, ${unit}`, { 'font-size': 12 }),
    text({ x: right, y: bottom + 36 }, 'plane angle θ: 0 square to the axis, ±90 along it', {
      'text-anchor': 'end',
      'font-size': 11,
      fill: SOFT,
    }),
    ...legend(left, height - 12, reading !== null, statement?.comparedQuantity ?? 'planeAngle'),
  );
  const title = options.title ?? describeFigure(assessment, reading);
  return element(
    'svg',
    {
      xmlns: 'http://www.w3.org/2000/svg',
      viewBox: `0 0 ${width} ${height}`,
      width,
      height,
      role: 'img',
      'font-family': FIGURE_FONT,
      'aria-label': title,
    },
    `<title>${escapeXml(title)}</title>${element('rect', { x: 0, y: 0, width, height, fill: '#ffffff' })}${parts.join('')}`,
  );
}

function measuredBand(
  reading: FigureReading,
  compared: 'planeAngle' | 'planeTilt',
  x: (deg: number) => number,
  top: number,
  bottom: number,
): string[] {
  const tilt = compared === 'planeTilt' && reading.planeTiltDeg !== null;
  const centre = tilt ? (reading.planeTiltDeg as number) : reading.planeAngleDeg;
  const half = tilt
    ? (reading.planeTiltExpandedUncertaintyDeg ?? reading.expandedUncertaintyDeg)
    : reading.expandedUncertaintyDeg;
  // A flat break has a tilt and no hand: it is shown on both sides.
  const centres = tilt && centre > 0.05 ? [centre, -centre] : [centre];
  const out: string[] = [];
  for (const c of centres) {
    for (const [from, to] of stretches(c - half, c + half)) {
      out.push(
        element('rect', {
          x: x(from),
          y: top,
          width: Math.max(1, x(to) - x(from)),
          height: bottom - top,
          fill: BAND,
          'fill-opacity': '0.28',
        }),
      );
    }
    const shown = c > 90 ? c - 180 : c <= -90 ? c + 180 : c;
    out.push(
      element('path', { d: `M${px(x(shown))} ${top}V${bottom}`, stroke: BAND, 'stroke-width': 2.6 }),
      element('path', { d: `M${px(x(shown))} ${bottom}l-6 10h12z`, fill: BAND }),
    );
  }
  return out;
}

function legend(left: number, baseline: number, measured: boolean, compared: 'planeAngle' | 'planeTilt'): string[] {
  const entries: [string, string, number][] = [
    [element('path', { d: 'M0 -4h26', stroke: NORMAL, 'stroke-width': 2.4 }), 'normal stress σn(θ)', 150],
    [
      element('path', { d: 'M0 -4h26', stroke: SHEAR, 'stroke-width': 2.4, 'stroke-dasharray': '7 4' }),
      'shear stress τnt(θ)',
      150,
    ],
  ];
  if (measured) {
    entries.push([
      `${element('rect', { x: 0, y: -10, width: 26, height: 12, fill: BAND, 'fill-opacity': '0.28' })}${element('path', { d: 'M13 -10v12', stroke: BAND, 'stroke-width': 2.6 })}`,
      compared === 'planeTilt' ? 'measured tilt β ± U, either side' : 'measured θ ± U',
      190,
    ]);
  }
  let at = left;
  return entries.map(([mark, label, step]) => {
    const out = element(
      'g',
      { transform: `translate(${px(at)} ${px(baseline)})` },
      `${mark}${element('text', { x: 32, y: 0, 'font-size': 11, fill: INK }, escapeXml(label))}`,
    );
    at += step + 30;
    return out;
  });
}

function describeFigure(assessment: Assessment, reading: FigureReading | null): string {
  const planes = assessment.planes.map((p) => `${PLANE_LABEL[p.plane]} at ${degrees(p.planeAngleDeg)}`).join(', ');
  const measured =
    reading === null
      ? 'nothing measured'
      : `measured plane angle ${degrees(reading.planeAngleDeg)} ± ${degrees(reading.expandedUncertaintyDeg)}`;
  return `Normal and shear stress on planes from −90° to 90°; ${planes}; ${measured}`;
}

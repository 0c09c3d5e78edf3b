import type { Bar } from './bar.ts';
import type { Camera, PixelPoint, ScenePoint } from './camera.ts';

/** A stretch of the nominal trace between two azimuths, radians. */
export interface TracePiece {
  readonly fromPhi: number;
  readonly toPhi: number;
  readonly planeAngleDeg: number;
  readonly closingStep: boolean;
  /** Whether the plane angle of the photo is the slope of this stretch. */
  readonly main: boolean;
}

export interface TracePoint {
  readonly phi: number;
  readonly x: number;
  /** Azimuth on the nominal course, before wandering: tells which piece the point belongs to. */
  readonly nominalPhi: number;
}

/** Half of the azimuth over which the slope is fitted, degrees. */
const FRONT_DEG = 60;
/** Pieces steeper than this are fitted as azimuth over axis, or their slope would drown in the roughness. */
const STEEP_DEG = 60;

/** A point of a bar's outer surface in the scene. */
export function onSurface(bar: Bar, phi: number, x: number): ScenePoint {
  const yaw = (bar.yawDeg * Math.PI) / 180;
  const y = Math.sin(phi);
  return {
    x: bar.position.x + bar.radiusR * (Math.cos(yaw) * x - Math.sin(yaw) * y),
    y: bar.position.y + bar.radiusR * (Math.sin(yaw) * x + Math.cos(yaw) * y),
    z: bar.position.z + bar.radiusR * Math.cos(phi),
  };
}

/** Where the camera stands round a bar's axis: azimuth of the middle of the visible face, and distance in its radii. */
export function facing(bar: Bar, camera: Camera): { phi: number; distanceR: number } {
  const yaw = (bar.yawDeg * Math.PI) / 180;
  const x = camera.position.x - bar.position.x;
  const y = camera.position.y - bar.position.y;
  const across = -Math.sin(yaw) * x + Math.cos(yaw) * y;
  const z = camera.position.z - bar.position.z;
  return { phi: Math.atan2(across, z), distanceR: Math.hypot(across, z) / bar.radiusR };
}

const turnedInto = (phi: number, around: number): number =>
  phi - 2 * Math.PI * Math.round((phi - around) / (2 * Math.PI));

/** The rough trace of one half all round, from the surface the renderer follows. */
export function roughTrace(bar: Bar, half: 'a' | 'b', steps = 1440): TracePoint[] {
  const { fracture } = bar;
  if (!fracture) return [];
  const nominal = new Set<number>();
  for (let i = 0; i < steps; i++) nominal.add(-Math.PI + (2 * Math.PI * (i + 0.5)) / steps);
  for (const [from, to] of fracture.recipe.profile.steep) {
    for (let i = 0; i <= 240; i++) nominal.add(turnedInto(from + ((to - from) * i) / 240, 0));
  }
  const phis = [...nominal].sort((p, q) => p - q);
  return fracture.rim(half, phis).map((point, i) => ({ ...point, nominalPhi: phis[i] as number }));
}

/** The part of a trace the camera sees, from the lower to the upper side of the face. */
export function visiblePart(points: readonly TracePoint[], bar: Bar, camera: Camera): TracePoint[] {
  const { phi, distanceR } = facing(bar, camera);
  const limit = 1 / distanceR;
  return points
    .map((point) => ({ ...point, phi: turnedInto(point.phi, phi), nominalPhi: turnedInto(point.nominalPhi, phi) }))
    .filter((point) => Math.cos(point.phi - phi) > limit)
    .sort((p, q) => p.nominalPhi - q.nominalPhi);
}

export interface HalfTrace {
  readonly bar: Bar;
  readonly half: 'a' | 'b';
  /** Turn of this half against the pieces, radians. */
  readonly turnRad: number;
}

const pieceOf = (pieces: readonly TracePiece[], nominalPhi: number): TracePiece | undefined =>
  pieces.find((piece) => {
    const phi = turnedInto(nominalPhi, (piece.fromPhi + piece.toPhi) / 2);
    return phi >= piece.fromPhi && phi <= piece.toPhi;
  });

/** Runs of points on the main piece; a closing step in view parts it into two. */
function mainStretches(points: readonly TracePoint[], pieces: readonly TracePiece[], turnRad: number): TracePoint[][] {
  const stretches: TracePoint[][] = [];
  let running = false;
  for (const point of points) {
    const main = pieceOf(pieces, point.nominalPhi - turnRad)?.main === true;
    if (main && running) stretches.at(-1)?.push(point);
    else if (main) stretches.push([point]);
    running = main;
  }
  return stretches;
}

/**
 * Least-squares slope of the rough trace over ±60° of the visible face, as plane angle in degrees; each stretch of
 * each half has its own intercept and the slope is common. Only stretches of the main piece count. Null where too little of it shows.
 */
export function visibleFrontThetaDeg(
  halves: readonly HalfTrace[],
  pieces: readonly TracePiece[],
  camera: Camera,
): number | null {
  const main = pieces.find((piece) => piece.main);
  if (!main) return null;
  let sumPP = 0;
  let sumPX = 0;
  let sumXX = 0;
  let least = Number.POSITIVE_INFINITY;
  for (const { bar, half, turnRad } of halves) {
    const centre = facing(bar, camera).phi;
    const points = visiblePart(roughTrace(bar, half), bar, camera).filter(
      (point) => Math.abs(point.phi - centre) <= (FRONT_DEG * Math.PI) / 180,
    );
    const stretches = mainStretches(points, pieces, turnRad);
    least = Math.min(
      least,
      stretches.reduce((sum, stretch) => sum + stretch.length, 0),
    );
    for (const stretch of stretches) {
      const meanPhi = stretch.reduce((sum, point) => sum + point.phi, 0) / stretch.length;
      const meanX = stretch.reduce((sum, point) => sum + point.x, 0) / stretch.length;
      for (const point of stretch) {
        sumPP += (point.phi - meanPhi) ** 2;
        sumPX += (point.phi - meanPhi) * (point.x - meanX);
        sumXX += (point.x - meanX) ** 2;
      }
    }
  }
  if (least < 20) return null;
  const steep = Math.abs(main.planeAngleDeg) > STEEP_DEG;
  const theta = steep ? Math.PI / 2 - Math.atan(sumPX / sumXX) : Math.atan(sumPX / sumPP);
  const degrees = (theta * 180) / Math.PI;
  return degrees > 90 ? degrees - 180 : degrees;
}

export interface TrueSegment {
  readonly thetaDeg: number;
  readonly share: number;
  readonly phiDeg: readonly [number, number];
  readonly closingStep: boolean;
}

/** Stretches of the trace that show, with their share of its visible length on the unrolled surface. */
export function visibleSegments({ bar, half, turnRad }: HalfTrace, pieces: readonly TracePiece[], camera: Camera) {
  const centre = facing(bar, camera).phi;
  const visible = visiblePart(roughTrace(bar, half), bar, camera);
  const found: { piece: TracePiece; length: number; from: number; to: number }[] = [];
  for (const point of visible) {
    const piece = pieceOf(pieces, point.nominalPhi - turnRad);
    if (!piece) continue;
    const last = found.at(-1);
    if (last?.piece === piece) {
      last.to = point.nominalPhi;
    } else found.push({ piece, length: 0, from: point.nominalPhi, to: point.nominalPhi });
  }
  // Length along the nominal course: roughness would make every stretch longer with ever finer steps.
  const toDeg = 180 / Math.PI;
  const lengths = found.map(({ piece, from, to }) => {
    const slope = Math.tan((piece.planeAngleDeg * Math.PI) / 180);
    return (to - from) * Math.hypot(1, slope);
  });
  const total = lengths.reduce((sum, length) => sum + length, 0);
  return found.map(
    ({ piece, from, to }, i): TrueSegment => ({
      thetaDeg: piece.planeAngleDeg,
      share: (lengths[i] as number) / total,
      phiDeg: [(from - centre) * toDeg, (to - centre) * toDeg],
      closingStep: piece.closingStep,
    }),
  );
}

/** Points of a visible trace on the picture, thinned to about `most`. */
export function tracePx(points: readonly TracePoint[], bar: Bar, camera: Camera, most = 160): PixelPoint[] {
  const every = Math.max(1, Math.floor(points.length / most));
  return points
    .filter((_, i) => i % every === 0 || i === points.length - 1)
    .map((point) => camera.project(onSurface(bar, point.phi, point.x)));
}

/** Width between the two silhouettes at an axis position, px. */
export function silhouetteWidthPx(bar: Bar, x: number, camera: Camera): number {
  const { phi, distanceR } = facing(bar, camera);
  const half = Math.acos(1 / distanceR);
  const upper = camera.project(onSurface(bar, phi + half, x));
  const lower = camera.project(onSurface(bar, phi - half, x));
  const [from, to] = [axisPoint(bar, x - 0.5, camera), axisPoint(bar, x + 0.5, camera)];
  const length = Math.hypot(to.xPx - from.xPx, to.yPx - from.yPx);
  const nx = -(to.yPx - from.yPx) / length;
  const ny = (to.xPx - from.xPx) / length;
  return Math.abs((upper.xPx - lower.xPx) * nx + (upper.yPx - lower.yPx) * ny);
}

function axisPoint(bar: Bar, x: number, camera: Camera): PixelPoint {
  const yaw = (bar.yawDeg * Math.PI) / 180;
  return camera.project({
    x: bar.position.x + bar.radiusR * Math.cos(yaw) * x,
    y: bar.position.y + bar.radiusR * Math.sin(yaw) * x,
    z: bar.position.z,
  });
}

/** The projected axis as far as bar and picture reach. */
export function axisPx(bar: Bar, camera: Camera): [PixelPoint, PixelPoint] {
  const { widthPx, heightPx } = camera.recipe;
  const inside = ({ xPx, yPx }: PixelPoint) => xPx >= 0 && yPx >= 0 && xPx <= widthPx - 1 && yPx <= heightPx - 1;
  const reach = (limit: number): PixelPoint => {
    let last = axisPoint(bar, 0, camera);
    for (let i = 1; i <= 400; i++) {
      const next = axisPoint(bar, (limit * i) / 400, camera);
      if (!inside(next)) return last;
      last = next;
    }
    return last;
  };
  return [reach(Math.max(-40, bar.fromX)), reach(Math.min(40, bar.toX))];
}

/** Median distance between the lips of a pair on the picture, px. */
export function lipGapPx(
  a: readonly PixelPoint[],
  b: readonly PixelPoint[],
): { median: number; shareAbove1px: number } {
  const distances = a
    .map((p) => Math.min(...b.slice(1).map((q, i) => toStretch(p, b[i] as PixelPoint, q))))
    .sort((p, q) => p - q);
  return {
    median: distances[Math.floor(distances.length / 2)] ?? 0,
    shareAbove1px: distances.filter((d) => d > 1).length / distances.length,
  };
}

function toStretch(p: PixelPoint, a: PixelPoint, b: PixelPoint): number {
  const dx = b.xPx - a.xPx;
  const dy = b.yPx - a.yPx;
  const square = dx * dx + dy * dy || 1e-12;
  const t = Math.min(1, Math.max(0, ((p.xPx - a.xPx) * dx + (p.yPx - a.yPx) * dy) / square));
  return Math.hypot(p.xPx - a.xPx - t * dx, p.yPx - a.yPx - t * dy);
}

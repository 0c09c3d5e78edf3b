import type { ScenePoint } from './camera.ts';
import type { Fracture } from './fracture.ts';
import type { Material } from './materials.ts';
import { smoothstep } from './smoothstep.ts';

/** A round bar or tube in the scene. Its own frame has unit radius, x along its axis, z towards the camera. */
export interface Bar {
  readonly position: ScenePoint;
  /** Turn about the line to the camera, degrees, counter-clockwise. */
  readonly yawDeg: number;
  readonly radiusR: number;
  /** Bore as a share of the radius; 0 for a solid bar. */
  readonly bore: number;
  /** Sawn ends in the bar's own frame; beyond the picture where it is cut by the border. */
  readonly fromX: number;
  readonly toX: number;
  readonly fracture: Fracture | null;
  /** Which sides of the fracture are there: a up to it, b beyond it. */
  readonly halves: 'a' | 'b' | 'both';
  readonly material: Material;
}

export const FACE = { none: 0, outer: 1, fracture: 2, sawn: 3, bore: 4 } as const;

/** Where a ray meets a bar; reused for every ray, in the bar's own frame. */
export class BarHit {
  face = 0;
  distance = Number.POSITIVE_INFINITY;
  x = 0;
  y = 0;
  z = 0;
  normalX = 0;
  normalY = 0;
  normalZ = 0;
}

const FIRST_STEP = 0.008;
const LONGEST_STEP = 0.05;

/** Follows rays into one bar. */
export class BarTracer {
  readonly bar: Bar;
  private readonly cosine: number;
  private readonly sine: number;
  private readonly breakFrom: number;
  private readonly breakTo: number;
  private readonly startX: number;
  private readonly endX: number;
  private readonly hasA: boolean;
  private readonly hasB: boolean;
  // The ray in the bar's frame.
  private ox = 0;
  private oy = 0;
  private oz = 0;
  private dx = 0;
  private dy = 0;
  private dz = 0;

  constructor(bar: Bar) {
    this.bar = bar;
    const yaw = (bar.yawDeg * Math.PI) / 180;
    this.cosine = Math.cos(yaw);
    this.sine = Math.sin(yaw);
    this.breakFrom = bar.fracture?.fromX ?? Number.POSITIVE_INFINITY;
    this.breakTo = bar.fracture?.toX ?? Number.POSITIVE_INFINITY;
    this.hasA = bar.halves !== 'b' || !bar.fracture;
    this.hasB = bar.halves !== 'a' || !bar.fracture;
    this.startX = this.hasA ? bar.fromX : Math.max(bar.fromX, this.breakFrom);
    this.endX = this.hasB ? bar.toX : Math.min(bar.toX, this.breakTo);
  }

  /** Turns a vector of the bar's frame into the scene's. */
  sceneX(x: number, y: number): number {
    return this.cosine * x - this.sine * y;
  }
  sceneY(x: number, y: number): number {
    return this.sine * x + this.cosine * y;
  }

  private enter(o: ScenePoint, dx: number, dy: number, dz: number): void {
    const { position, radiusR } = this.bar;
    const x = (o.x - position.x) / radiusR;
    const y = (o.y - position.y) / radiusR;
    this.ox = this.cosine * x + this.sine * y;
    this.oy = -this.sine * x + this.cosine * y;
    this.oz = (o.z - position.z) / radiusR;
    this.dx = (this.cosine * dx + this.sine * dy) / radiusR;
    this.dy = (-this.sine * dx + this.cosine * dy) / radiusR;
    this.dz = dz / radiusR;
  }

  private solid(x: number, y: number, z: number): boolean {
    const { bar } = this;
    if (x < this.startX || x > this.endX) return false;
    if (bar.bore > 0 && y * y + z * z < bar.bore * bar.bore) return false;
    const fracture = bar.fracture;
    if (!fracture) return true;
    if (x < this.breakFrom) return this.hasA;
    if (x > this.breakTo) return this.hasB;
    return (this.hasA && fracture.sideA(x, y, z) < 0) || (this.hasB && fracture.sideB(x, y, z) > 0);
  }

  /** First meeting of the ray with the bar nearer than `hit.distance`; true when `hit` was replaced. */
  trace(origin: ScenePoint, directionX: number, directionY: number, directionZ: number, hit: BarHit): boolean {
    this.enter(origin, directionX, directionY, directionZ);
    const { ox, oy, oz, dx, dy, dz } = this;
    const a = dy * dy + dz * dz;
    const b = oy * dy + oz * dz;
    const discriminant = b * b - a * (oy * oy + oz * oz - 1);
    if (discriminant <= 0) return false;
    const root = Math.sqrt(discriminant);
    const entry = (-b - root) / a;
    if (entry <= 0 || entry >= hit.distance) return false;
    const exit = Math.min((-b + root) / a, hit.distance);
    const entryX = ox + entry * dx;
    const exitX = ox + exit * dx;
    if (Math.max(entryX, exitX) < this.startX || Math.min(entryX, exitX) > this.endX) return false;
    if (this.solid(entryX, oy + entry * dy, oz + entry * dz)) {
      this.record(hit, entry, FACE.outer);
      return true;
    }
    return this.march(entry, exit, hit);
  }

  /**
   * Whether the bar itself keeps a light from a point of its break: follows the ray from just off the surface to the
   * outer surface. `hit` is in the bar's frame, the direction in the scene's.
   */
  shadesItself(hit: BarHit, lx: number, ly: number, lz: number): boolean {
    const dx = this.cosine * lx + this.sine * ly;
    const dy = -this.sine * lx + this.cosine * ly;
    const lift = 0.025;
    let x = hit.x + lift * hit.normalX;
    let y = hit.y + lift * hit.normalY;
    let z = hit.z + lift * hit.normalZ;
    let step = 0.02;
    for (let i = 0; i < 40 && y * y + z * z < 1; i++) {
      if (this.solid(x, y, z)) return true;
      x += step * dx;
      y += step * dy;
      z += step * lz;
      step = Math.min(0.08, step * 1.25);
    }
    return false;
  }

  private solidAlong(t: number): boolean {
    return this.solid(this.ox + t * this.dx, this.oy + t * this.dy, this.oz + t * this.dz);
  }

  private march(entry: number, exit: number, hit: BarHit): boolean {
    const unit = 1 / Math.hypot(this.dx, this.dy, this.dz);
    let outside = entry;
    // Small steps near both walls, where the broken piece runs out to a thin edge.
    const last = exit - 1e-6 * unit;
    for (let t = entry + FIRST_STEP * unit; outside < last; ) {
      t = Math.min(t, last);
      if (this.solidAlong(t)) {
        let inside = t;
        for (let halving = 0; halving < 9; halving++) {
          const middle = (outside + inside) / 2;
          if (this.solidAlong(middle)) inside = middle;
          else outside = middle;
        }
        if (inside >= hit.distance) return false;
        this.record(hit, inside, this.faceAt(inside));
        return true;
      }
      outside = t;
      const fromWall = Math.min(t - entry, exit - t);
      t += Math.min(LONGEST_STEP * unit, FIRST_STEP * unit + 0.35 * fromWall);
    }
    return false;
  }

  private faceAt(t: number): number {
    const x = this.ox + t * this.dx;
    const y = this.oy + t * this.dy;
    const z = this.oz + t * this.dz;
    const { bar } = this;
    const near = 0.004;
    if (x < bar.fromX + near || x > bar.toX - near) return FACE.sawn;
    if (bar.bore > 0 && Math.abs(Math.hypot(y, z) - bar.bore) < near) {
      // The rim of the bore belongs to the break when the point lies on its surface too.
      const back = 0.03;
      const open = !this.solid(x + back, y, z) || !this.solid(x - back, y, z);
      if (!open || this.towardsBore(y, z)) return FACE.bore;
    }
    return FACE.fracture;
  }

  private towardsBore(y: number, z: number): boolean {
    return y * this.dy + z * this.dz > 0;
  }

  private record(hit: BarHit, t: number, face: number): void {
    hit.distance = t;
    hit.face = face;
    const x = this.ox + t * this.dx;
    const y = this.oy + t * this.dy;
    const z = this.oz + t * this.dz;
    hit.x = x;
    hit.y = y;
    hit.z = z;
    if (face === FACE.outer || face === FACE.bore) {
      const length = Math.hypot(y, z) * (face === FACE.bore ? -1 : 1);
      hit.normalX = 0;
      hit.normalY = y / length;
      hit.normalZ = z / length;
    } else if (face === FACE.sawn) {
      hit.normalX = x < (this.bar.fromX + this.bar.toX) / 2 ? -1 : 1;
      hit.normalY = 0;
      hit.normalZ = 0;
    } else {
      this.fractureNormal(hit, x, y, z);
    }
  }

  private fractureNormal(hit: BarHit, x: number, y: number, z: number): void {
    const fracture = this.bar.fracture;
    if (!fracture) return;
    const h = 0.012;
    const onA = !this.hasB || (this.hasA && Math.abs(fracture.sideA(x, y, z)) <= Math.abs(fracture.sideB(x, y, z)));
    const side = (px: number, py: number, pz: number) =>
      onA ? fracture.sideA(px, py, pz) : fracture.sideB(px, py, pz);
    const gx = side(x + h, y, z) - side(x - h, y, z);
    const gy = side(x, y + h, z) - side(x, y - h, z);
    const gz = side(x, y, z + h) - side(x, y, z - h);
    const length = (Math.hypot(gx, gy, gz) || 1) * (onA ? 1 : -1);
    hit.normalX = gx / length;
    hit.normalY = gy / length;
    hit.normalZ = gz / length;
    // Steep walls are cut through by the cell of the difference: the side that faces the ray is the true one.
    const facing = hit.normalX * this.dx + hit.normalY * this.dy + hit.normalZ * this.dz;
    if (facing > 0) {
      hit.normalX *= -1;
      hit.normalY *= -1;
      hit.normalZ *= -1;
    }
  }

  /**
   * Share of the light that passes the bar from a point of the scene, 0 to 1, with a penumbra.
   * @param penumbra width of the half-shadow per distance from the shading edge
   */
  lightPast(px: number, py: number, pz: number, lx: number, ly: number, lz: number, penumbra: number): number {
    this.enter({ x: px, y: py, z: pz }, lx, ly, lz);
    const { oy, oz, dy, dz, bar } = this;
    const square = dy * dy + dz * dz;
    const nearest = -(oy * dy + oz * dz) / square;
    if (nearest <= 0) return 1;
    const miss = Math.abs(oy * dz - oz * dy) / Math.sqrt(square);
    const width = 0.015 + penumbra * nearest * bar.radiusR;
    if (miss > 1 + width) return 1;
    const side = smoothstep(1 - width, 1 + width, miss);
    const reach = Math.sqrt(Math.max(0, 1 - miss * miss) / square);
    const first = this.inLength(nearest - reach, width);
    const second = this.inLength(nearest + reach, width);
    return 1 - (1 - side) * Math.max(first, second);
  }

  /** 1 where the bar's outer surface is present at the point of the ray, 0 beyond its ends or in the opening. */
  private inLength(t: number, width: number): number {
    const { bar } = this;
    const x = this.ox + t * this.dx;
    const present =
      smoothstep(bar.fromX - width, bar.fromX + width, x) * (1 - smoothstep(bar.toX - width, bar.toX + width, x));
    const fracture = bar.fracture;
    if (present === 0 || !fracture) return present;
    if (x < this.breakFrom - width) return this.hasA ? present : 0;
    if (x > this.breakTo + width) return this.hasB ? present : 0;
    const y = this.oy + t * this.dy;
    const z = this.oz + t * this.dz;
    const first = this.hasA ? 1 - smoothstep(-width, width, fracture.sideA(x, y, z)) : 0;
    const second = this.hasB ? smoothstep(-width, width, fracture.sideB(x, y, z)) : 0;
    return present * Math.max(first, second);
  }

  /** Share of the sky a point of the bench keeps beside the bar, 0 to 1. */
  skyBeside(px: number, py: number, pz: number): number {
    const { bar } = this;
    const { position, radiusR } = bar;
    const rx = px - position.x;
    const ry = py - position.y;
    const x = (this.cosine * rx + this.sine * ry) / radiusR;
    const y = (-this.sine * rx + this.cosine * ry) / radiusR;
    const z = (pz - position.z) / radiusR;
    const square = Math.max(1, y * y + z * z);
    if (square > 60) return 1;
    let start = this.startX;
    let end = this.endX;
    if (bar.fracture) {
      const rim = bar.fracture.recipe.profile.x(Math.atan2(y, Math.max(z, -0.3)));
      if (!this.hasB) end = rim;
      if (!this.hasA) start = rim;
    }
    const length = smoothstep(start - 0.8, start + 0.8, x) * (1 - smoothstep(end - 0.8, end + 0.8, x));
    return 1 - (0.8 * length) / square;
  }
}

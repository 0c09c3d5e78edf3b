import type { Background } from './backgrounds.ts';
import { type Bar, BarHit, BarTracer, FACE } from './bar.ts';
import { Camera, type CameraRecipe } from './camera.ts';
import type { FlatThing } from './clutter.ts';
import { type Rgb, Surface } from './materials.ts';

/** A lamp far away. */
export interface Lamp {
  /** Unit direction towards the lamp, in the scene. */
  readonly x: number;
  readonly y: number;
  readonly z: number;
  readonly colour: Rgb;
  /** Width of half-shadows per distance from the shading edge; 0 = sun-hard. */
  readonly penumbra: number;
}

export interface Scene {
  readonly camera: CameraRecipe;
  readonly bars: readonly Bar[];
  readonly benchZ: number;
  readonly background: Background;
  readonly things: readonly FlatThing[];
  readonly lamps: readonly Lamp[];
  /** Light from the whole sky above the bench. */
  readonly sky: Rgb;
}

const BENCH = 1;
/** Follows rays from the camera into the scene and sums up the light that comes back. */
export class SceneTracer {
  private readonly scene: Scene;
  private readonly camera: Camera;
  private readonly tracers: readonly BarTracer[];
  private readonly things: readonly { thing: FlatThing; cosine: number; sine: number; id: number }[];
  private readonly hit = new BarHit();
  private readonly surface = new Surface();
  private readonly direction = new Float64Array(3);
  private readonly light = new Float64Array(3);
  /** Result of the last ray. */
  red = 0;
  green = 0;
  blue = 0;

  constructor(scene: Scene) {
    this.scene = scene;
    this.camera = new Camera(scene.camera);
    this.tracers = scene.bars.map((bar) => new BarTracer(bar));
    this.things = scene.things.map((thing, i) => {
      const turn = (thing.turnDeg * Math.PI) / 180;
      return { thing, cosine: Math.cos(turn), sine: Math.sin(turn), id: 2 + i };
    });
  }

  /** Follows the ray through a pixel. @returns number of the face that was met; differs where an edge is */
  follow(xPx: number, yPx: number): number {
    const { camera, direction, hit, tracers } = this;
    camera.ray(xPx, yPx, direction);
    const dx = direction[0] as number;
    const dy = direction[1] as number;
    const dz = direction[2] as number;
    hit.distance = Number.POSITIVE_INFINITY;
    let met = -1;
    for (let i = 0; i < tracers.length; i++) {
      if ((tracers[i] as BarTracer).trace(camera.position, dx, dy, dz, hit)) met = i;
    }
    if (met < 0) return this.bench(dx, dy, dz);
    this.bar(met, dx, dy, dz);
    return 100 + 8 * met + hit.face;
  }

  private bench(dx: number, dy: number, dz: number): number {
    const { scene, camera } = this;
    const t = (scene.benchZ - camera.position.z) / dz;
    if (!(t > 0)) {
      this.red = scene.sky[0];
      this.green = scene.sky[1];
      this.blue = scene.sky[2];
      return 0;
    }
    const x = camera.position.x + t * dx;
    const y = camera.position.y + t * dy;
    const id = this.paintBench(x, y);
    this.lightOnBench(x, y, id);
    this.shine(0, 0, 1, dx, dy, dz, 1);
    return id;
  }

  /** Colour of the bench or of the thing that lies on it. */
  private paintBench(x: number, y: number): number {
    const { surface } = this;
    for (let i = this.things.length - 1; i >= 0; i--) {
      const entry = this.things[i];
      if (!entry || this.cover(entry, x, y) === 0) continue;
      const { thing, cosine, sine, id } = entry;
      const rx = x - thing.x;
      const ry = y - thing.y;
      thing.paint(cosine * rx + sine * ry, cosine * ry - sine * rx, surface);
      return id;
    }
    this.scene.background.paint(x, y, surface);
    return BENCH;
  }

  private cover(entry: { thing: FlatThing; cosine: number; sine: number }, x: number, y: number): number {
    const { thing, cosine, sine } = entry;
    const rx = x - thing.x;
    const ry = y - thing.y;
    const u = Math.abs(cosine * rx + sine * ry);
    const v = Math.abs(cosine * ry - sine * rx);
    if (u > thing.halfU || v > thing.halfV) return 0;
    return thing.round && u * u + v * v > thing.halfU * thing.halfU ? 0 : 1;
  }

  /** Light that arrives on the bench: lamps less shadows, sky less what the bars hide. */
  private lightOnBench(x: number, y: number, id: number): void {
    const { scene, tracers, light } = this;
    let sky = 1;
    for (const tracer of tracers) sky *= tracer.skyBeside(x, y, scene.benchZ);
    light[0] = scene.sky[0] * sky;
    light[1] = scene.sky[1] * sky;
    light[2] = scene.sky[2] * sky;
    for (const lamp of scene.lamps) {
      let share = 1;
      for (const tracer of tracers)
        share *= tracer.lightPast(x, y, scene.benchZ, lamp.x, lamp.y, lamp.z, lamp.penumbra);
      for (const entry of this.things) {
        if (entry.id <= id) continue;
        const reach = entry.thing.heightR / lamp.z;
        share *= 1 - 0.9 * this.cover(entry, x + reach * lamp.x, y + reach * lamp.y);
      }
      if (id === BENCH) {
        // The nearest part of a low thing's shadow: between its foot and the full shift.
        for (const entry of this.things) {
          const reach = (0.5 * entry.thing.heightR) / lamp.z;
          share *= 1 - 0.9 * this.cover(entry, x + reach * lamp.x, y + reach * lamp.y);
        }
      }
      this.addLamp(lamp, share * lamp.z);
    }
  }

  private addLamp(lamp: Lamp, share: number): void {
    const { light } = this;
    light[0] = (light[0] as number) + lamp.colour[0] * share;
    light[1] = (light[1] as number) + lamp.colour[1] * share;
    light[2] = (light[2] as number) + lamp.colour[2] * share;
  }

  private bar(index: number, dx: number, dy: number, dz: number): void {
    const { hit, surface, scene } = this;
    const tracer = this.tracers[index] as BarTracer;
    const { material } = tracer.bar;
    const { x, y, z, face } = hit;
    if (face === FACE.outer) material.outer(x, Math.atan2(y, z), surface);
    else if (face === FACE.sawn) material.sawn(y, z, surface);
    else material.inner(x, y, z, surface);
    let nx = hit.normalX;
    let ny = hit.normalY;
    let nz = hit.normalZ;
    if (face === FACE.outer && (surface.tipX !== 0 || surface.tipPhi !== 0)) {
      nx += surface.tipX;
      ny += surface.tipPhi * hit.normalZ;
      nz -= surface.tipPhi * hit.normalY;
      const length = Math.sqrt(nx * nx + ny * ny + nz * nz);
      nx /= length;
      ny /= length;
      nz /= length;
    }
    const sx = tracer.sceneX(nx, ny);
    const sy = tracer.sceneY(nx, ny);
    this.lightOnBar(tracer, face, sx, sy, nz);
    this.shine(sx, sy, nz, dx, dy, dz, face === FACE.outer ? 1 : this.openness(tracer));
    if (surface.clear > 0) this.showThrough(tracer.bar.position.x + x, y, surface.clear);
    if (face === FACE.outer && scene.benchZ > -1.2 && hit.normalZ < 0) this.dim(1 + 0.5 * hit.normalZ);
  }

  private dim(share: number): void {
    this.red *= share;
    this.green *= share;
    this.blue *= share;
  }

  /** Share of the sky a point inside the break sees, from its depth below the outer surface and the opening. */
  private openness(tracer: BarTracer): number {
    const { hit } = this;
    const fracture = tracer.bar.fracture;
    const depth = Math.max(0, 1 - Math.hypot(hit.y, hit.z));
    if (hit.face === FACE.bore) return 0.25;
    if (hit.face === FACE.sawn || !fracture) return 1;
    if (tracer.bar.halves !== 'both') return 1 - 0.25 * depth;
    const opening = 0.35 * Math.max(0.004, fracture.openingR);
    return opening / (opening + depth);
  }

  private lightOnBar(tracer: BarTracer, face: number, nx: number, ny: number, nz: number): void {
    const { scene, light, hit } = this;
    const open = face === FACE.outer ? 1 : this.openness(tracer);
    const up = open * (0.5 + 0.5 * nz);
    const bounce = open * 0.22 * (0.5 - 0.5 * nz);
    light[0] = scene.sky[0] * (up + bounce);
    light[1] = scene.sky[1] * (up + bounce);
    light[2] = scene.sky[2] * (up + bounce);
    for (const lamp of scene.lamps) {
      const facing = nx * lamp.x + ny * lamp.y + nz * lamp.z;
      if (facing <= 0) continue;
      if (face === FACE.bore) continue;
      if (face === FACE.fracture && tracer.shadesItself(hit, lamp.x, lamp.y, lamp.z)) continue;
      this.addLamp(lamp, facing);
    }
  }

  /** Light sent back: scattered by the colour of the surface, mirrored by its gloss. */
  private shine(nx: number, ny: number, nz: number, dx: number, dy: number, dz: number, open: number): void {
    const { surface, light, scene } = this;
    const scattered = 1 - 0.75 * surface.metal;
    this.red = surface.red * (light[0] as number) * scattered;
    this.green = surface.green * (light[1] as number) * scattered;
    this.blue = surface.blue * (light[2] as number) * scattered;
    if (surface.gloss === 0) return;
    const cosine = -(nx * dx + ny * dy + nz * dz);
    const rx = dx + 2 * cosine * nx;
    const ry = dy + 2 * cosine * ny;
    const rz = dz + 2 * cosine * nz;
    // Sky above, bench below, joined softly; lamps as lobes round their mirror image.
    const above = Math.min(1, Math.max(0, 0.5 + 2.2 * rz));
    let mirrored = (0.14 + 0.86 * above * (0.75 + 0.25 * rz)) * ((scene.sky[0] + scene.sky[1] + scene.sky[2]) / 3);
    let lobes = 0;
    for (const lamp of scene.lamps) {
      const toLamp = rx * lamp.x + ry * lamp.y + rz * lamp.z;
      if (toLamp > 0 && nx * lamp.x + ny * lamp.y + nz * lamp.z > 0)
        lobes += toLamp ** surface.tightness * (0.25 + 0.035 * surface.tightness) * lamp.colour[1];
    }
    mirrored = open * surface.gloss * (mirrored * (0.3 + 0.7 * surface.metal) + lobes);
    const metal = surface.metal;
    const strongest = Math.max(surface.red, surface.green, surface.blue, 1e-3);
    this.red += mirrored * (1 - metal + (metal * surface.red) / strongest);
    this.green += mirrored * (1 - metal + (metal * surface.green) / strongest);
    this.blue += mirrored * (1 - metal + (metal * surface.blue) / strongest);
  }

  /** A clear rod is a cylinder lens: it shows the bench behind it, turned over and stretched. */
  private showThrough(x: number, y: number, clear: number): void {
    const { surface, scene } = this;
    const { red, green, blue } = this;
    scene.background.paint(x, -2.4 * y, surface);
    const sky = 0.75 * (1 - 0.55 * y * y);
    let lamps = 0;
    for (const lamp of scene.lamps) lamps += 0.8 * lamp.colour[1] * lamp.z;
    this.red = red * (1 - clear) + clear * surface.red * (scene.sky[0] * sky + lamps * sky);
    this.green = green * (1 - clear) + clear * surface.green * (scene.sky[1] * sky + lamps * sky);
    this.blue = blue * (1 - clear) + clear * surface.blue * (scene.sky[2] * sky + lamps * sky);
  }
}

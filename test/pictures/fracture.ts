import { cloudNoise, grainyNoise } from './noiseTexture.ts';
import type { TraceProfile } from './traceProfile.ts';

export interface FractureRecipe {
  readonly profile: TraceProfile;
  /** Opening between the halves, square to the trace, radii; 0 for a half. */
  readonly gapR: number;
  /** Change of the opening from the bottom to the top of the visible face, radii per radius. */
  readonly gapTaper: number;
  /** Root mean square roughness along the axis, radii. */
  readonly roughnessR: number;
  /** 0 = only long waves, 1 = granular. */
  readonly granularity: number;
  /** Wandering of steep pieces round the axis, radians. */
  readonly wanderRad: number;
  /** How the surface runs inward: (ρ / r)^taper; 1 = cone, small = step-like. Flat cuts ignore it. */
  readonly taper: number;
  /** Places in the noise textures. */
  readonly offsetU: number;
  readonly offsetV: number;
}

const TEXELS_PER_RADIUS = 90;
/** Share of the roughness that the two halves do not share: wear and loss of grains. */
const OWN_ROUGHNESS = 0.18;

/**
 * Two rough surfaces across a bar of unit radius along x. Half a is the solid with sideA < 0, half b the one with
 * sideB > 0; the opening lies between. y runs up the visible face, z to the camera.
 */
export class Fracture {
  readonly recipe: FractureRecipe;
  /** x range that holds every point of both surfaces. */
  readonly fromX: number;
  readonly toX: number;
  private readonly middleX: number;
  private readonly spread: number;
  private readonly axialGap: number;
  private readonly cloud = cloudNoise();
  private readonly grain = grainyNoise();

  constructor(recipe: FractureRecipe) {
    this.recipe = recipe;
    const { profile, gapR, gapTaper, roughnessR } = recipe;
    this.middleX = (profile.lowestX + profile.highestX) / 2;
    // A gap square to the trace opens along the axis by `axialGap` and round it by `spread`; a flat cut opens along the axis.
    this.spread = profile.plane ? 0 : 0.7 * gapR;
    this.axialGap = profile.plane ? gapR * Math.hypot(1, profile.plane.a) : 0.75 * gapR;
    const rough = 5 * roughnessR;
    this.fromX = profile.lowestX - rough - 0.02;
    this.toX = profile.highestX + rough + gapR * 4 + Math.abs(gapTaper) * 2 + 0.02;
  }

  roughness(y: number, z: number): number {
    const { roughnessR, granularity, offsetU, offsetV } = this.recipe;
    const u = offsetU + TEXELS_PER_RADIUS * y;
    const v = offsetV + TEXELS_PER_RADIUS * z;
    return roughnessR * ((1 - granularity) * this.cloud.at(u, v) + granularity * this.grain.at(u, v));
  }

  private ownRoughness(y: number, z: number): number {
    const { roughnessR, offsetU, offsetV } = this.recipe;
    return roughnessR * OWN_ROUGHNESS * this.grain.at(offsetV + 97 + 140 * y, offsetU + 31 + 140 * z);
  }

  private wander(x: number): number {
    return this.recipe.wanderRad * this.cloud.at(this.recipe.offsetV + TEXELS_PER_RADIUS * x, this.recipe.offsetU);
  }

  /** Course of lip b: course of lip a widened round the axis, so that steep pieces open too. */
  private widened(phi: number): number {
    const { profile } = this.recipe;
    if (this.spread === 0) return profile.x(phi);
    return Math.max(profile.x(phi - this.spread), profile.x(phi), profile.x(phi + this.spread));
  }

  private inward(rimX: number, rho: number): number {
    return this.middleX + (rimX - this.middleX) * rho ** this.recipe.taper;
  }

  /** Signed axial distance from surface a, radii; negative inside half a. */
  sideA(x: number, y: number, z: number): number {
    const { profile } = this.recipe;
    if (profile.plane) return x - profile.plane.a * y - profile.plane.b * z - this.roughness(y, z);
    const phi = Math.atan2(y, z) + this.wander(x);
    return x - this.inward(profile.x(phi), Math.hypot(y, z)) - this.roughness(y, z);
  }

  /** Signed axial distance from surface b, radii; positive inside half b. */
  sideB(x: number, y: number, z: number): number {
    const { profile, gapTaper } = this.recipe;
    const gap = Math.max(0, this.axialGap + gapTaper * y) + this.ownRoughness(y, z);
    const rough = this.roughness(y, z) + gap;
    if (profile.plane) return x - profile.plane.a * y - profile.plane.b * z - rough;
    const phi = Math.atan2(y, z) + this.wander(x);
    return x - this.inward(this.widened(phi), Math.hypot(y, z)) - rough;
  }

  /**
   * The exact rim of a half on the outer surface: for each nominal azimuth φ' the point where φ + wander(x) = φ'.
   * @returns points { phi, x }, φ in radians, x in radii
   */
  rim(half: 'a' | 'b', nominalPhis: Iterable<number>): { phi: number; x: number }[] {
    const { profile, gapTaper } = this.recipe;
    const points: { phi: number; x: number }[] = [];
    for (const nominal of nominalPhis) {
      const rimX = half === 'a' ? profile.x(nominal) : this.widened(nominal);
      let phi = nominal;
      let x = rimX;
      for (let turn = 0; turn < 6; turn++) {
        const y = Math.sin(phi);
        const z = Math.cos(phi);
        x = rimX + this.roughness(y, z);
        if (half === 'b') x += Math.max(0, this.axialGap + gapTaper * y) + this.ownRoughness(y, z);
        if (profile.plane) break;
        phi = nominal - this.wander(x);
      }
      points.push({ phi, x });
    }
    return points;
  }

  /** Width of the opening beside a point, radii; sets how dark its depth is. */
  get openingR(): number {
    return this.axialGap + this.spread;
  }
}

import type { Bar } from './bar.ts';
import type { BreakCourse } from './breaks.ts';
import { Fracture } from './fracture.ts';
import type { View } from './framing.ts';
import type { Material } from './materials.ts';
import type { Random } from './random.ts';
import { type TraceProfile, turned } from './traceProfile.ts';
import type { HalfTrace } from './truth.ts';

/** The halves of a broken specimen, where they lie and where their traces run. */
export interface BrokenSpecimen {
  readonly bars: Bar[];
  readonly halves: HalfTrace[];
  readonly gapR: number;
  readonly roughnessR: number;
}

/** Breaks a bar along a course and lays its halves down, as close or as far apart as benches show them. */
export function breakSpecimen(
  view: View,
  course: BreakCourse,
  material: Material,
  random: Random,
  radiusPx: number,
): BrokenSpecimen {
  const wideOpen = view === 'pair' ? random.pick(['crack', 'small', 'small', 'small', 'wide'] as const) : 'none';
  const gapPx = {
    none: 0,
    crack: random.uniform(1.8, 3),
    small: random.uniform(3, 9),
    wide: random.uniform(0.12, 0.5) * radiusPx,
  }[wideOpen];
  const roughnessR = material.roughnessR * random.uniform(0.6, 1.5);
  const recipe = {
    profile: course.profile,
    gapR: gapPx / radiusPx,
    gapTaper: wideOpen === 'none' ? 0 : random.normal(0, 0.12) * (gapPx / radiusPx),
    roughnessR,
    granularity: Math.min(1, Math.max(0, material.granularity + random.uniform(-0.15, 0.15))),
    wanderRad: random.uniform(0.01, 0.045),
    taper: random.uniform(0.7, 1.3),
    offsetU: random.uniform(0, 512),
    offsetV: random.uniform(0, 512),
  };
  const bore = random.chance(material.name.includes('tube') ? 1 : 0.15) ? random.uniform(0.5, 0.88) : 0;
  const cutAt = () => (random.chance(0.5) ? 60 : random.uniform(4, 10));
  const shared = { radiusR: 1, bore, material };
  const fracture = new Fracture(recipe);
  const fromX = fracture.fromX - cutAt();
  const toX = fracture.toX + cutAt();
  const a = { ...shared, position: { x: 0, y: 0, z: 0 }, yawDeg: 0, fromX, toX, fracture };
  if (view === 'half') {
    const bar: Bar = { ...a, halves: 'a' };
    return { bars: [bar], halves: [{ bar, half: 'a', turnRad: 0 }], gapR: 0, roughnessR };
  }
  // Halves joined by a step in view lie as they broke: turned or shifted, they would run into one another.
  if (random.chance(0.55) || stepShows(course)) {
    const bar: Bar = { ...a, halves: 'both' };
    const halves = (['a', 'b'] as const).map((half): HalfTrace => ({ bar, half, turnRad: 0 }));
    return { bars: [bar], halves, gapR: recipe.gapR, roughnessR };
  }
  // The second half was laid down a little turned, shifted or askew. It is moved apart as far as that needs room.
  const turnRad = random.normal(0, 0.035);
  const yawDeg = random.normal(0, 0.5);
  const shift = random.normal(0, 0.02);
  const room = roomToTurn(course.profile, turnRad) + Math.abs(yawDeg * 0.0175) + 0.5 * Math.abs(shift);
  const bar: Bar = { ...a, halves: 'a' };
  const second: Bar = {
    ...shared,
    position: { x: room, y: shift + random.normal(0, 0.005), z: 0 },
    yawDeg,
    fromX,
    toX,
    fracture: new Fracture({ ...recipe, profile: turned(course.profile, turnRad) }),
    halves: 'b',
  };
  return {
    bars: [bar, second],
    halves: [
      { bar, half: 'a', turnRad: 0 },
      { bar: second, half: 'b', turnRad },
    ],
    gapR: recipe.gapR + room,
    roughnessR,
  };
}

const stepShows = ({ profile }: BreakCourse): boolean =>
  profile.steep.some(([from, to]) => Math.cos((from + to) / 2) > -0.2);

/** How far the second half must move along the axis so that its turned rim clears the first, radii. */
function roomToTurn(profile: TraceProfile, turnRad: number): number {
  let room = 0;
  for (let phi = -Math.PI / 2; phi <= Math.PI / 2; phi += 0.02) {
    room = Math.max(room, profile.x(phi) - profile.x(phi - turnRad));
  }
  return room;
}

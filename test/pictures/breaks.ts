import type { Random } from './random.ts';
import { flatCut, piecewise, type TraceNode, type TraceProfile } from './traceProfile.ts';
import type { TracePiece } from './truth.ts';

export type BreakKind = 'helix' | 'transverse' | 'oblique-plane' | 'longitudinal' | 'mixed';

/** Course of a break round the specimen and what is true of it. */
export interface BreakCourse {
  readonly kind: BreakKind;
  readonly profile: TraceProfile;
  readonly pieces: readonly TracePiece[];
  /** Nominal plane angle; null for a mixed break. */
  readonly thetaDeg: number | null;
  /** Tilt of a flat break; null for the others. */
  readonly betaDeg: number | null;
}

const DEG = Math.PI / 180;
const slopeOf = (thetaDeg: number): number => Math.tan(thetaDeg * DEG);
const angleOf = (slope: number): number => Math.atan(slope) / DEG;

/** Pieces between nodes; `kinds` names each in turn, the last being the one that closes the turn. */
function course(
  kind: BreakKind,
  nodes: readonly TraceNode[],
  kinds: readonly ('main' | 'other' | 'closing')[],
  thetaDeg: number | null,
): BreakCourse {
  const first = nodes[0] as TraceNode;
  const closed = [...nodes, { phi: first.phi + 2 * Math.PI, x: first.x }];
  const pieces = closed.slice(1).map((to, i): TracePiece => {
    const from = closed[i] as TraceNode;
    return {
      fromPhi: from.phi,
      toPhi: to.phi,
      planeAngleDeg: angleOf((to.x - from.x) / (to.phi - from.phi)),
      closingStep: kinds[i] === 'closing',
      main: kinds[i] === 'main',
    };
  });
  return { kind, profile: piecewise(nodes), pieces, thetaDeg, betaDeg: null };
}

/** A helix of nearly one turn, closed by a steep step whose middle lies at `stepPhi`. */
export function helix(thetaDeg: number, stepPhi: number, stepRad: number): BreakCourse {
  const reach = Math.PI - stepRad / 2;
  const rise = slopeOf(thetaDeg) * reach;
  const centre = stepPhi - Math.PI;
  const nodes = [
    { phi: centre - reach, x: -rise },
    { phi: centre + reach, x: rise },
  ];
  // The middle of the visible face lies at x = 0.
  const facePhi = centre - 2 * Math.PI * Math.round(centre / (2 * Math.PI));
  const shift = slopeOf(thetaDeg) * facePhi;
  return course(
    'helix',
    nodes.map(({ phi, x }) => ({ phi, x: Math.abs(facePhi) < 2.4 ? x + shift : x })),
    ['main', 'closing'],
    thetaDeg,
  );
}

/** Nearly square to the axis all round. */
export function transverse(tiltDeg: number, azimuthRad: number): BreakCourse {
  const { a, b } = planeFactors(tiltDeg, azimuthRad);
  // A transverse break is the rough surface itself; its small tilt is part of it.
  return { ...flat(a, b, tiltDeg), kind: 'transverse', betaDeg: null };
}

/** A flat cut with tilt β whose steepest direction lies at `azimuthRad` round the axis (π/2 = up the face). */
export function obliquePlane(betaDeg: number, azimuthRad: number): BreakCourse {
  const { a, b } = planeFactors(betaDeg, azimuthRad);
  return flat(a, b, betaDeg);
}

const planeFactors = (tiltDeg: number, azimuthRad: number) => ({
  a: slopeOf(tiltDeg) * Math.sin(azimuthRad),
  b: slopeOf(tiltDeg) * Math.cos(azimuthRad),
});

function flat(a: number, b: number, betaDeg: number): BreakCourse {
  const all = { fromPhi: -Math.PI, toPhi: Math.PI, planeAngleDeg: angleOf(a), closingStep: false, main: true };
  return { kind: 'oblique-plane', profile: flatCut(a, b), pieces: [all], thetaDeg: angleOf(a), betaDeg };
}

/** A split along the axis at `splitPhi`, with square ends, and its counterpart at the back. */
export function longitudinal(thetaDeg: number, splitPhi: number, lengthR: number): BreakCourse {
  const half = lengthR / 2 / Math.abs(slopeOf(thetaDeg));
  const x = (Math.sign(thetaDeg) * lengthR) / 2;
  const back = splitPhi + Math.PI;
  return course(
    'longitudinal',
    [
      { phi: splitPhi - half, x: -x },
      { phi: splitPhi + half, x },
      { phi: back - 0.06, x },
      { phi: back + 0.06, x: -x },
    ],
    ['main', 'other', 'other', 'other'],
    thetaDeg,
  );
}

/** Square to the axis on one side of `bendPhi`, a helix of the other; closed at the back. */
export function mixed(helixDeg: number, bendPhi: number, helixAbove: boolean): BreakCourse {
  const back = bendPhi + Math.PI;
  const rise = slopeOf(helixDeg) * (Math.PI - 0.1);
  const nodes = helixAbove
    ? [
        { phi: bendPhi - Math.PI + 0.1, x: 0 },
        { phi: bendPhi, x: 0 },
        { phi: back - 0.1, x: rise },
      ]
    : [
        { phi: bendPhi - Math.PI + 0.1, x: -rise },
        { phi: bendPhi, x: 0 },
        { phi: back - 0.1, x: 0 },
      ];
  return course('mixed', nodes, ['other', 'other', 'closing'], null);
}

/** A random course of the kind, with the angles and places such breaks have on the bench. */
export function breakOfKind(kind: BreakKind, random: Random): BreakCourse {
  switch (kind) {
    case 'helix': {
      const usual = random.chance(0.75);
      const angle = random.sign() * (usual ? random.normal(45, 3.5) : random.uniform(25, 64));
      const place = random.uniform();
      const atBack = random.uniform(2.2, 4.1);
      const atSide = random.sign() * random.uniform(1.1, 1.5);
      const inView = random.uniform(-0.8, 0.8);
      const stepPhi = place < 0.74 ? atBack : place < 0.9 ? atSide : inView;
      return helix(angle, stepPhi, random.uniform(0.05, 0.25));
    }
    case 'transverse':
      return transverse(Math.abs(random.normal(0, 3.5)), random.uniform(0, 2 * Math.PI));
    case 'oblique-plane':
      return obliquePlane(random.uniform(12, 52), random.uniform(0, 2 * Math.PI));
    case 'longitudinal':
      return longitudinal(
        random.sign() * random.uniform(83, 89.6),
        random.uniform(-0.55, 0.55),
        random.uniform(2.2, 5),
      );
    case 'mixed':
      return mixed(random.sign() * random.uniform(38, 54), random.uniform(-0.45, 0.45), random.chance(0.5));
  }
}

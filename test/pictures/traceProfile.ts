/** A point of a fracture trace on the unrolled surface, in specimen radii: azimuth φ (radians, up) and x (axis). */
export interface TraceNode {
  readonly phi: number;
  readonly x: number;
}

/** Nominal course of a fracture trace x = f(φ) round the whole circumference, in specimen radii. */
export interface TraceProfile {
  x(phi: number): number;
  /** Steep pieces, where the trace must be followed closely: [from, to] in radians. */
  readonly steep: readonly (readonly [number, number])[];
  readonly lowestX: number;
  readonly highestX: number;
  /** For a flat cut x = a sin φ + b cos φ, its two factors; null otherwise. */
  readonly plane: { readonly a: number; readonly b: number } | null;
}

/** A flat cut. Its tilt β = atan √(a² + b²). */
export function flatCut(a: number, b: number): TraceProfile {
  const reach = Math.hypot(a, b);
  return {
    x: (phi) => a * Math.sin(phi) + b * Math.cos(phi),
    steep: [],
    lowestX: -reach,
    highestX: reach,
    plane: { a, b },
  };
}

/**
 * Straight pieces through `nodes` (φ ascending, all within one turn), closed by a straight piece from the last
 * node to the first one a turn later.
 */
export function piecewise(nodes: readonly TraceNode[]): TraceProfile {
  const first = nodes[0];
  if (!first) throw new Error('a trace needs at least one node');
  const closed = [...nodes, { phi: first.phi + 2 * Math.PI, x: first.x }];
  const xs = nodes.map((node) => node.x);
  const steep = closed.slice(1).flatMap((node, i) => {
    const before = closed[i] as TraceNode;
    const slope = Math.abs(node.x - before.x) / Math.max(1e-9, node.phi - before.phi);
    return slope > 3 ? [[before.phi, node.phi] as const] : [];
  });
  return {
    x: (phi) => {
      const turned = phi - 2 * Math.PI * Math.floor((phi - first.phi) / (2 * Math.PI));
      for (let i = 1; i < closed.length; i++) {
        const to = closed[i] as TraceNode;
        if (turned <= to.phi) {
          const from = closed[i - 1] as TraceNode;
          return from.x + ((to.x - from.x) * (turned - from.phi)) / Math.max(1e-9, to.phi - from.phi);
        }
      }
      return first.x;
    },
    steep,
    lowestX: Math.min(...xs),
    highestX: Math.max(...xs),
    plane: null,
  };
}

/** The same course turned round the axis by `turnRad`, as when a half does not lie in its old place. */
export function turned(profile: TraceProfile, turnRad: number): TraceProfile {
  if (profile.plane) {
    const { a, b } = profile.plane;
    const cosine = Math.cos(turnRad);
    const sine = Math.sin(turnRad);
    return flatCut(a * cosine + b * sine, b * cosine - a * sine);
  }
  return {
    ...profile,
    x: (phi) => profile.x(phi - turnRad),
    steep: profile.steep.map(([from, to]) => [from + turnRad, to + turnRad] as const),
  };
}

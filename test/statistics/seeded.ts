/** Seeded random numbers for the tests of the statistics: the same samples on every machine. */

/** Numbers in (0, 1) by mulberry32. */
export function uniforms(seed: number, count: number): number[] {
  let state = seed >>> 0;
  return Array.from({ length: count }, () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let t = Math.imul(state ^ (state >>> 15), 1 | state);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return (((t ^ (t >>> 14)) >>> 0) + 0.5) / 4294967296;
  });
}

/** Standard normal numbers by Box and Muller. */
export function standardNormals(seed: number, count: number): number[] {
  const u = uniforms(seed, 2 * count);
  return Array.from(
    { length: count },
    (_, i) => Math.sqrt(-2 * Math.log(u[2 * i] as number)) * Math.cos(2 * Math.PI * (u[2 * i + 1] as number)),
  );
}

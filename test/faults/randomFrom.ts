/** Numbers in [0, 1) that are the same for the same seed (linear congruential, Numerical Recipes' constants). */
export function randomFrom(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    return state / 2 ** 32;
  };
}

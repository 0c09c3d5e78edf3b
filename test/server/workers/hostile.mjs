/** A measuring worker that does to its pool what the name of the photo says. */
export default async function hostile({ path }) {
  if (path.includes('throws')) throw new Error('this photo is poisonous');
  if (path.includes('exits')) process.exit(3);
  if (path.includes('loops')) for (;;);
  if (path.includes('eats')) {
    const heap = [];
    for (;;) heap.push(new Array(100_000).fill(Math.random()));
  }
  return {
    outcome: 'not-measured',
    reason: { code: 'no-specimen', message: 'nothing there' },
    sha256: '',
    elapsedMs: 1,
    warnings: [],
  };
}

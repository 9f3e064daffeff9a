/** A stream of numbers from 0 up to but not 1, always the same for a seed (xorshift32, Marsaglia 2003). */
export function createRandom(seed: number): () => number {
  let state = (Math.imul(seed, 0x9e3779b1) ^ 0x5bd1e995) | 0 || 1;
  return () => {
    state ^= state << 13;
    state ^= state >>> 17;
    state ^= state << 5;
    return (state >>> 0) / 4294967296;
  };
}

/** Seeded uniform numbers in [0, 1): the mulberry32 generator (Tommy Ettinger, public domain). */
export function uniform(seed: number): () => number {
  let state = seed | 0;
  return () => {
    state = (state + 0x6d2b79f5) | 0;
    let mixed = Math.imul(state ^ (state >>> 15), 1 | state);
    mixed = (mixed + Math.imul(mixed ^ (mixed >>> 7), 61 | mixed)) ^ mixed;
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 4294967296;
  };
}

/** Seeded standard normal numbers, by the Box-Muller transform. */
export function gaussian(seed: number): () => number {
  const next = uniform(seed);
  return () => Math.sqrt(-2 * Math.log(1 - next())) * Math.cos(2 * Math.PI * next());
}

/** First-order autoregressive noise of unit variance, `lag1` the correlation of neighbours. */
export function autoregressive(normal: () => number, count: number, lag1: number): Float64Array {
  let value = normal();
  return new Float64Array(count).map(() => {
    const now = value;
    value = lag1 * value + Math.sqrt(1 - lag1 ** 2) * normal();
    return now;
  });
}

/** Drifting noise: unit white noise on a random walk of `step` a frame. */
export function drifting(normal: () => number, count: number, step: number): Float64Array {
  let walk = 0;
  return new Float64Array(count).map(() => {
    walk += step * normal();
    return walk + normal();
  });
}

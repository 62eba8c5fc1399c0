/** A source of random numbers that gives the same ones for the same seed, on every machine. */
export interface SeededRandom {
  /** Uniform in (0, 1), never 0 or 1. */
  uniform(): number;
  /** Normal with mean 0 and standard deviation 1. */
  normal(): number;
}

/**
 * Makes a seeded source: a Weyl sequence through a 32-bit mixer, normal numbers by Box and Muller. Good for
 * simulation and bootstrap; not for secrets.
 *
 * @param seed any whole number; its low 32 bits count
 */
export function seededRandom(seed: number): SeededRandom {
  let state = seed >>> 0;
  const uniform = (): number => {
    state = (state + 0x9e3779b9) >>> 0;
    let mixed = state ^ (state >>> 16);
    mixed = Math.imul(mixed, 0x85ebca6b);
    mixed ^= mixed >>> 13;
    mixed = Math.imul(mixed, 0xc2b2ae35);
    mixed ^= mixed >>> 16;
    return ((mixed >>> 0) + 0.5) / 2 ** 32;
  };
  return {
    uniform,
    normal: () => Math.sqrt(-2 * Math.log(uniform())) * Math.cos(2 * Math.PI * uniform()),
  };
}

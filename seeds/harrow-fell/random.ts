/** A source of numbers evenly spread over [0, 1). Always an argument, so that everything here repeats. */
export type Random = () => number

/**
 * A seeded source: Weyl sequence through a 32-bit mixer. Small and repeatable on every machine; good enough for a
 * simulation, not for secrets.
 * @param seed any integer
 */
export function makeRandom(seed: number): Random {
  let state = seed >>> 0
  return () => {
    state = (state + 0x9E3779B9) >>> 0
    let z = state
    z = Math.imul(z ^ (z >>> 16), 0x21F0AAAD)
    z = Math.imul(z ^ (z >>> 15), 0x735A2D97)
    return ((z ^ (z >>> 15)) >>> 0) / 4294967296
  }
}

/**
 * One draw from the standard normal distribution.
 * @see Box and Muller, A note on the generation of random normal deviates (1958)
 */
export function gaussian(random: Random): number {
  // 1 - u lies in (0, 1], so the logarithm is finite.
  return Math.sqrt(-2 * Math.log(1 - random())) * Math.cos(2 * Math.PI * random())
}

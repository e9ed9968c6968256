/**
 * A source of uniform numbers in [0, 1) that gives the same sequence for the same seed on every machine
 * (the 32-bit generator "mulberry32", public domain, T. Ettinger). For demo data and tests; not for secrets.
 */
export function seededUniform(seed: number): () => number {
  let state = seed >>> 0
  return function next(): number {
    state = (state + 0x6d2b79f5) >>> 0
    let mixed = Math.imul(state ^ (state >>> 15), state | 1)
    mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61)
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 4294967296
  }
}

/** A source of normal numbers (mean 0, standard deviation 1) by the Box–Muller transform (Box & Muller 1958). */
export function seededNormal(seed: number): () => number {
  const uniform = seededUniform(seed)
  let spare: number | undefined
  return function next(): number {
    if (spare !== undefined) {
      const value = spare
      spare = undefined
      return value
    }
    const radius = Math.sqrt(-2 * Math.log(1 - uniform()))
    const angle = 2 * Math.PI * uniform()
    spare = radius * Math.sin(angle)
    return radius * Math.cos(angle)
  }
}

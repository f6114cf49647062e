/** A seeded low-discrepancy sample: Halton points turned by a seeded shift, so that few samples cover many uncertainties evenly. */

/** Bases of the dimensions; Halton's points are even in as many as there are small primes. */
const PRIMES = [2, 3, 5, 7, 11, 13] as const
/** `count` points in [0, 1)^dimensions; the same seed gives the same points. */
export function lowDiscrepancy(
  seed: number,
  { count, dimensions }: { readonly count: number; readonly dimensions: number },
): readonly (readonly number[])[] {
  const bases = PRIMES.slice(0, dimensions)
  const shifts = bases.map((_, dimension) => hashed(seed, dimension))
  return Array.from({ length: count }, (_, index) =>
    bases.map((base, dimension) => (radicalInverse(index + 1, base) + (shifts[dimension] ?? 0)) % 1),
  )
}

/** The digits of a number in a base, mirrored at the point (Halton 1960). */
function radicalInverse(index: number, base: number): number {
  let value = 0
  let place = 1 / base
  for (let rest = index; rest > 0; rest = Math.floor(rest / base)) {
    value += (rest % base) * place
    place /= base
  }
  return value
}

/** A number in [0, 1) from a seed and a place: the 32-bit finaliser of MurmurHash3. */
function hashed(seed: number, place: number): number {
  let bits = (Math.imul(seed | 0, 0x9e3779b1) + Math.imul(place + 1, 0x85ebca6b)) | 0
  bits = Math.imul(bits ^ (bits >>> 16), 0x85ebca6b)
  bits = Math.imul(bits ^ (bits >>> 13), 0xc2b2ae35)
  return ((bits ^ (bits >>> 16)) >>> 0) / 2 ** 32
}

/** Inverse of the symmetric triangular distribution on [−1, 1]: near 0 more often than at the ends, never beyond them. */
export const triangular = (u: number): number => (u < 0.5 ? Math.sqrt(2 * u) - 1 : 1 - Math.sqrt(2 * (1 - u)))

/** Seeded numbers in [0, 1): Mulberry32 (Tommy Ettinger, public domain). */
export function seededRandom(seed: number): () => number {
  let state = seed | 0
  return () => {
    state = (state + 0x6d2b79f5) | 0
    let mixed = Math.imul(state ^ (state >>> 15), 1 | state)
    mixed = (mixed + Math.imul(mixed ^ (mixed >>> 7), 61 | mixed)) ^ mixed
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 4_294_967_296
  }
}

/** In place. */
export function shuffle<T>(items: T[], random: () => number): T[] {
  for (let last = items.length - 1; last > 0; last--) {
    const other = Math.floor(random() * (last + 1))
    const kept = items[last]!
    items[last] = items[other]!
    items[other] = kept
  }
  return items
}

/**
 * The most that whole runs can make of a room: with runs of 4.5 kW under 40 kW that is 36 kW. Every plan keeps to it, so
 * a bound may count with it. Cost: distinct powers × room in units of their common divisor, once.
 */
const MOST_STEPS = 200_000

export interface LimitLoadOfRun {
  readonly limitW: Int32Array
}

export function reachableRoom(roomW: Float64Array, slots: number, runs: readonly LimitLoadOfRun[]): Float64Array {
  const reachable = roomW.slice()
  for (let limit = 0; limit * slots < roomW.length; limit++) {
    const room = reachable.subarray(limit * slots, (limit + 1) * slots)
    const powers = [...new Set(runs.map((run) => run.limitW[limit] ?? 0))].filter((power) => power > 0)
    const unit = powers.reduce(commonDivisor, 0)
    const total = runs.reduce((sum, run) => sum + (run.limitW[limit] ?? 0), 0)
    if (unit === 0) continue
    const most = Math.floor(Math.min(total, Math.max(...room)) / unit)
    // A fine unit under a large room: nearly everything is reachable, and the table would be larger than the gain.
    if (most > MOST_STEPS) continue
    const below = reachableBelow(
      powers.map((power) => power / unit),
      most,
    )
    for (let slot = 0; slot < slots; slot++) room[slot] = unit * (below[Math.min(most, Math.floor((room[slot] ?? 0) / unit))] ?? 0)
  }
  return reachable
}

/** For each whole number up to `most`, the largest sum of powers that is not above it; a power may repeat. */
function reachableBelow(powers: readonly number[], most: number): Int32Array {
  const below = new Int32Array(most + 1)
  for (let sum = 1; sum <= most; sum++) {
    const exact = powers.some((power) => power <= sum && below[sum - power] === sum - power)
    below[sum] = exact ? sum : (below[sum - 1] ?? 0)
  }
  return below
}

const commonDivisor = (one: number, other: number): number => (other === 0 ? one : commonDivisor(other, one % other))

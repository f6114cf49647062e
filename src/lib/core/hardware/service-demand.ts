/**
 * What a service calculation may count of connected storage heaters and dwellings. Shown beside a load that passes the service, to
 * say what a permit may have assumed: synchronised timers undo it, so it never lowers a load here.
 */
import type { RuleProfile } from './profiles/profile.ts'

export const heaterDemandFactor = ({ heaterDemand }: RuleProfile, heaters: number): number =>
  heaterDemand.rows.findLast((row) => heaters >= row.fromCount)?.factor ?? 1

/** `null` where the profile has no table, or it does not hold for so few dwellings (three at the least). */
export const dwellingDemandFactor = ({ dwellingDemand }: RuleProfile, units: number): number | null =>
  units < 3 ? null : (dwellingDemand?.rows.find((row) => units <= row.upToUnits)?.factor ?? null)

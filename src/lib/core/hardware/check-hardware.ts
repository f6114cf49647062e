/**
 * Screens what is installed in a unit against a rule profile. Every check says figure, limit and clause; what is not known is
 * "not known", never a pass; a limit from memory never decides a pass alone. It screens; it does not certify.
 */
import { conductor, voltageDrop } from './conductor-checks.ts'
import { controlChecks } from './control-checks.ts'
import { continuousA, largestDevice, smallestDevice } from './device-checks.ts'
import { loadChecks } from './load-checks.ts'
import { gbBs7671 } from './profiles/gb-bs7671.ts'
import { iec60364 } from './profiles/iec-60364.ts'
import type { RuleProfile } from './profiles/profile.ts'
import { usNec2023 } from './profiles/us-nec-2023.ts'
import { recorded } from './recorded.ts'
import { safetyChecks } from './safety-checks.ts'
import type { Check, Installation, ProfileId } from './types.ts'

export const PROFILES: Readonly<Record<ProfileId, RuleProfile>> = { 'us-nec-2023': usNec2023, 'gb-bs7671': gbBs7671, 'iec-60364': iec60364 }

export function checkHardware(installation: Installation, profileId: ProfileId): readonly Check[] {
  const profile = PROFILES[profileId]
  const one = recorded(installation)
  const { tank } = installation.load
  return [
    ...loadChecks(one, profile),
    smallestDevice(one, tank, profile),
    largestDevice(one, profile),
    conductor(one, one.loadA === null ? null : continuousA(one.loadA, tank, profile), profile),
    voltageDrop(one, profile),
    ...safetyChecks(installation, profile),
    ...controlChecks(one, installation.controller, profile),
  ]
}

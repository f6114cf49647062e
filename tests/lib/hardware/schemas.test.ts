/** What may be recorded about a circuit: revisions older than a field stay readable, and what the checks need can be held. */
import { describe, expect, it } from 'vitest'
import { checkHardware } from '#lib/core/hardware/check-hardware.ts'
import type { Circuit } from '#lib/core/hardware/types.ts'
import { american, dial } from '#lib/demo/installations.ts'
import { installationSchema } from '#lib/hardware/schemas.ts'
import { describeInstallation, differences } from '#lib/hardware/view.ts'
import { CONTROL, installed } from '../../support/installations.ts'

const FULL: Partial<Circuit> = {
  markedMaxBreakerA: 30,
  terminalRatingC: 75,
  inThermalInsulation: false,
  mainsRangeV: { lowestV: 234, highestV: 246 },
  control: { ...CONTROL, transformerSecondaryV: null },
}

describe('installationSchema', () => {
  it('reads a revision from before the younger fields as it is, and adds nothing to it', () => {
    const old = american({ controller: dial(60), large: false })
    expect(Object.keys(old.circuit)).not.toContain('mainsRangeV')
    expect(installationSchema.parse(old)).toEqual(old)
  })
  it('holds everything that the checks ask for', () => {
    const full = installed({ circuit: FULL })
    expect(installationSchema.parse(JSON.parse(JSON.stringify(full)))).toEqual(full)
  })
  it('refuses a highest mains reading below the lowest, and says where', () => {
    const found = installationSchema.safeParse(installed({ circuit: { mainsRangeV: { lowestV: 246, highestV: 234 } } }))
    expect(found.error?.issues.map(({ path }) => path.join('.'))).toEqual(['circuit.mainsRangeV.highestV'])
  })
  it('screens an older revision without passing what it could not know', () => {
    const old = american({ controller: dial(60), large: false })
    expect(checkHardware(old, 'gb-bs7671').find((one) => one.id === 'conductor')?.verdict).toBe('not-known')
  })
})

describe('describeInstallation', () => {
  it('names the younger fields once they are recorded, and they show as a difference', () => {
    const before = installed({ circuit: { terminalRatingC: null, inThermalInsulation: null } })
    const after = installed({ circuit: { ...FULL, control: null } })
    expect(describeInstallation(before).some(({ label }) => label === 'Terminals rated for')).toBe(false)
    expect(differences(before, after)).toEqual([
      'Largest device on the nameplate: nothing → 30 A',
      'Terminals rated for: nothing → 75 °C',
      'Cable in thermal insulation: nothing → no',
      'Mains as read: nothing → 234 to 246 V',
    ])
  })
})

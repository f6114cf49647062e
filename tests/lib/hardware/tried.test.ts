/** What was tried, filled into the hardware form. */
import { describe, expect, it } from 'vitest'
import { blankInstallation } from '#lib/hardware/defaults.ts'
import { triedOn } from '#lib/hardware/tried.ts'

const installed = blankInstallation(240)
const tried = (query: string) => triedOn(installed, new URLSearchParams(query))

describe('triedOn', () => {
  it('fills in what was tried and says what', () => {
    const { installation, words } = tried('elementW=3000&setPointC=62&nominalVolumeL=120')
    expect(installation.load.tank).toMatchObject({ setPointC: 62, nominalVolumeL: 120, actualVolumeL: null })
    expect(words).toEqual(['element 3000 W', 'set point 62 °C', 'tank 120 L'])
  })
  it('leaves everything as it is installed where nothing was tried', () => {
    expect(tried('').installation).toEqual(installed)
    expect(tried('').words).toEqual([])
  })
  it('ignores what no record could hold', () => {
    expect(tried('setPointC=400&elementW=nan&nominalVolumeL=-1&runMin=%3Cscript%3E').installation).toEqual(installed)
  })
})

/** From an evaluation to what parts advice is asked: the longest need of the days, at its wall-clock time. */
import { beforeEach, describe, expect, it } from 'vitest'
import { listUnitEvaluations } from '#db/queries/evaluation.ts'
import { listOpenFlags } from '#db/queries/flag.ts'
import { loadNeededRun } from '#lib/hardware/load-needed-run.server.ts'
import { pressWords } from '#lib/hardware/press-words.ts'
import { runNeed } from '#lib/hardware/run-need.ts'
import { assignVisit } from '#lib/visit/assign-visit.server.ts'
import { loadVisit } from '#lib/visit/load-visits.server.ts'
import { NOW_MS } from '../../support/factories.ts'
import { COLD, makeWorld, personOf, unitOf, type World } from '../../support/world.ts'

let world: World
beforeEach(async () => {
  world = await makeWorld()
})

describe('loadNeededRun', () => {
  it('is the longest run that the coming days ask for', async () => {
    const { unitId } = unitOf(world, COLD)
    const needed = await loadNeededRun(world.landlord, { unitId, zone: 'Europe/London', nowMs: NOW_MS })
    const all = (await listUnitEvaluations(world.landlord, unitId, '2026-12-01', '2026-12-09')).flatMap((one) =>
      one.outcome.needs.map((need) => need.requiredRunMin ?? 0),
    )
    expect(all.length).toBeGreaterThan(5)
    expect(needed?.requiredMin).toBe(Math.max(...all))
  })
  it('is nothing of another organisation’s unit', async () => {
    const { unitId } = unitOf(world, COLD)
    expect(await loadNeededRun(world.stranger, { unitId, zone: 'Europe/London', nowMs: NOW_MS })).toBeNull()
  })
})

describe('runNeed', () => {
  it('reads the clock on the wall on a day on which it changes', () => {
    // Spring in London, 28 March 2027, a Sunday: five elapsed hours after midnight the wall shows 06:00 (IANA tz database).
    const clockChange = { atMin: 60, shiftMin: 60 }
    expect(runNeed({ requiredMin: 60, readyByMin: 300, day: '2027-03-28', clockChange }).readyBy).toEqual({ weekday: 6, minuteOfDay: 360 })
    expect(runNeed({ requiredMin: 60, readyByMin: 30, day: '2027-03-28', clockChange }).readyBy).toEqual({ weekday: 6, minuteOfDay: 30 })
  })
})

describe('what a visit is asked to change', () => {
  it('is the core’s advice with its reason, for the minutes needed', async () => {
    const { unitId } = unitOf(world, COLD)
    const flags = await listOpenFlags(world.landlord, { unitId })
    const input = { unitId, flagIds: flags.map((flag) => flag.id), electricianId: personOf(world.electrician), dueDay: '', note: '' }
    const visitId = await assignVisit(world.landlord, { input, organisationSlug: 'ours', nowMs: NOW_MS })
    const { visit } = await loadVisit(world.electrician, visitId)
    expect(visit.proposal.changes[0]).toMatch(
      /^Set the dial to \d+ min: It then runs at least \d+ min, at most \d+ min; \d+ min are needed\.$/,
    )
  })
})

describe('pressWords', () => {
  it('says of a pressed timer what a second press and a held button do, and of a clock nothing', () => {
    const words = pressWords({ kind: 'one-shot-fixed', settingMin: 60, toleranceFraction: 0.05 })
    expect(words).toContain('pressed again after 30 min it still ends after 60')
    expect(words).toContain('held down for 70 min it ends when let go')
    expect(pressWords({ kind: 'supplier-contactor', windows: [] })).toBeNull()
  })
})

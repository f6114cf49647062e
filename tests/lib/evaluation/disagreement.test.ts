/** "Model disagrees": raised by what a tenant says against what was computed, closed when they no longer do. The rule is our own; no source. */
import { beforeEach, describe, expect, it } from 'vitest'
import { inTransaction } from '#db/org-db.ts'
import { listClosedFlags, listOpenFlags } from '#db/queries/flag.ts'
import { addHardwareRevision, currentHardware } from '#db/queries/hardware.ts'
import { changeTenancyPerson } from '#db/queries/tenancy.ts'
import { DISAGREEMENT } from '#lib/evaluation/disagreement.ts'
import { evaluateProperty } from '#lib/evaluation/evaluate-property.server.ts'
import { evaluateUnit } from '#lib/evaluation/evaluate-unit.server.ts'
import { giveFeedback } from '#lib/feedback/give-feedback.server.ts'
import { startTenancy } from '#lib/tenancy/start-tenancy.server.ts'
import { addDays } from '#lib/core/time/civil.ts'
import { NOW_MS } from '../../support/factories.ts'
import { COLD, makeWorld, personOf, unitOf, WARM, type World } from '../../support/world.ts'

const DAY_MS = 86_400_000
const FIRST = '2026-12-01'
let world: World
beforeEach(async () => {
  world = await makeWorld()
  await inTransaction(world.landlord, (trx) => changeTenancyPerson(trx, unitOf(world, WARM).tenancyId, personOf(world.tenant)))
})
/** In the evening of the day `index` days after the first. */
const say = (verdict: 'hot' | 'cold', index: number, code = WARM) =>
  giveFeedback(world.tenant, {
    tenancyId: unitOf(world, code).tenancyId,
    input: { day: addDays(FIRST, index), verdict },
    nowMs: NOW_MS + index * DAY_MS + 8 * 3_600_000,
  })
const open = async (code = WARM) =>
  (await listOpenFlags(world.landlord, { unitId: unitOf(world, code).unitId })).find((flag) => flag.kind === 'model-disagrees')

describe('model disagrees', () => {
  it('is raised by the second "was cold" about days called ready, at once, with what to check first', async () => {
    await say('cold', 0)
    expect(await open()).toBeUndefined()
    await say('cold', 1)
    const flag = await open()
    expect(flag).toMatchObject({ severity: 'cold', summary: 'Computed as ready, said to be cold on 2 of 2 days' })
    const checks = flag?.evidence.lines.filter((line) => line.kind === 'fix').map((line) => `${line.label}: ${line.value}`) ?? []
    expect(checks).toHaveLength(4)
    for (const word of ['mixing valve', 'thermostat', 'element', 'share']) expect(checks.join(' ')).toContain(word)
    expect(flag?.evidence.lines.some((line) => line.kind === 'caution')).toBe(true)
  })
  it('tells the resistance an element should have by Ohm’s law, R = V² / P', async () => {
    await say('cold', 0)
    await say('cold', 1)
    const record = await currentHardware(world.landlord, unitOf(world, WARM).unitId)
    const element = record?.installation.load.tank.lowerElement ?? record?.installation.load.tank.upperElement
    if (!element) throw new Error('no element')
    const said = (await open())?.evidence.lines.find((line) => line.label === 'Then the elements')?.value ?? ''
    const ohms = [...said.matchAll(/about ([\d.]+) Ω/g)].map(([, ohm]) => Number(ohm))
    // Said in three digits: within half a percent.
    const expectedOhm = element.ratedVoltageV ** 2 / element.ratedPowerW
    expect(ohms.some((ohm) => Math.abs(ohm - expectedOhm) <= expectedOhm * 0.005)).toBe(true)
  })
  it('is not raised where the model itself says that the run is short', async () => {
    for (const index of [0, 1, 2]) await say('cold', index, COLD)
    expect(await open(COLD)).toBeUndefined()
  })
  it('closes by itself when later answers are hot, and says so', async () => {
    await say('cold', 0)
    await say('cold', 1)
    for (let index = 2; index < 2 + DISAGREEMENT.ofLastAnswers - 1; index++) await say('hot', index)
    expect(await open()).toBeUndefined()
    const { propertyId } = world.building
    const closed = await listClosedFlags(world.landlord, { propertyId, unitId: unitOf(world, WARM).unitId, limit: 5 })
    expect(closed.find((flag) => flag.kind === 'model-disagrees')?.closed).toMatchObject({ because: 'computation' })
  })
  it('closes when the last cold answer is older than it looks back', async () => {
    await say('cold', 0)
    await say('cold', 1)
    const after = NOW_MS + (2 + DISAGREEMENT.lookBackDays) * DAY_MS
    await evaluateProperty(world.landlord, { propertyId: world.building.propertyId, nowMs: after })
    expect(await open()).toBeUndefined()
  })
  it('starts afresh with the next revision of the hardware', async () => {
    await say('cold', 0)
    await say('cold', 1)
    const { unitId } = unitOf(world, WARM)
    const record = await currentHardware(world.landlord, unitId)
    if (!record) throw new Error('no record')
    const atMs = NOW_MS + 2 * DAY_MS
    const { installation } = record
    const revision = { unitId, installation, reason: 'Thermostat changed', visitId: null, recordedBy: null, recordedAtMs: atMs }
    await inTransaction(world.landlord, (trx) => addHardwareRevision(trx, revision))
    await evaluateUnit(world.landlord, { unitId, nowMs: atMs })
    expect(await open()).toBeUndefined()
  })
  it('counts nothing that a former tenant said', async () => {
    await say('cold', 0)
    await say('cold', 1)
    const input = { name: 'Next', email: 'next@tenants.example', fromDay: '2026-12-03' }
    await startTenancy(world.landlord, { unitId: unitOf(world, WARM).unitId, input, nowMs: NOW_MS + 2 * DAY_MS })
    await evaluateProperty(world.landlord, { propertyId: world.building.propertyId, nowMs: NOW_MS + 2 * DAY_MS })
    expect(await open()).toBeUndefined()
  })
})

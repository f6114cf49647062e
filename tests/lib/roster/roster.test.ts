/** The roster: every problem by line and column, all rows or none, and back again unchanged. */
import type { Kysely } from 'kysely'
import { beforeEach, describe, expect, it } from 'vitest'
import type { PropertyId } from '#db/ids.ts'
import type { OrgDb } from '#db/org-db.ts'
import { listCurrentHardware } from '#db/queries/hardware.ts'
import { findProperty } from '#db/queries/property.ts'
import { listUnits } from '#db/queries/unit.ts'
import type { Database } from '#db/schema.ts'
import { DEMO_BUILDINGS } from '#lib/demo/buildings.ts'
import { safeCell, sampleRoster } from '#lib/roster/columns.ts'
import { exportRoster } from '#lib/roster/export-roster.server.ts'
import { importRoster } from '#lib/roster/import-roster.server.ts'
import { formatShowers, parseProgramme, parseShowers, weekdaysOf } from '#lib/roster/programme-text.ts'
import { readRoster } from '#lib/roster/read-roster.ts'
import { makeBuilding } from '../../support/building.ts'
import { freshDatabase } from '../../support/database.ts'
import { makeLandlord, makePerson, NOW_MS, scopeFor } from '../../support/factories.ts'

const CONTEXT = { supplyVoltageV: 230, today: '2026-12-01' }
const empty = { ...(DEMO_BUILDINGS[0] as (typeof DEMO_BUILDINGS)[number]), units: [] }
const TABLE = `unit,floor,stack,tenant,email,litres,lower_w,controller,minutes,programme,r_megohm,c_microfarad,timer_ic,showers
1A,0,A,Ada,ada@tenants.example,150,3000,dial,90,,,,,06:45 1x8 Mon-Fri; 08:00 2x10 Sat-Sun
1B,0,B,Bao,bao@tenants.example,120,3000,switch,,05:00-06:30 daily,,,,07:00 1x8 daily
2A,1,A,Cem,cem@tenants.example,120,3000,rc,,,6.8,470,cmos,07:15 1x8 daily
`

describe('readRoster', () => {
  it('reads its own sample without a problem', () => {
    const { rows, problems } = readRoster(sampleRoster(), CONTEXT)
    expect(problems).toEqual([])
    expect(rows).toHaveLength(1)
  })
  it.each([
    ['semicolons and decimal commas', 'unit;litres;lower_w;controller;r_megohm;c_microfarad;timer_ic\n1;150,5;3000;rc;6,8;330;cmos\n'],
    ['tabs', 'unit\tlitres\tlower_w\tcontroller\tr_megohm\tc_microfarad\ttimer_ic\n1\t150.5\t3000\trc\t6.8\t330\tcmos\n'],
    ['a byte-order mark', '\uFEFFunit,litres,lower_w,controller,r_megohm,c_microfarad,timer_ic\r\n1,150.5,3000,rc,6.8,330,cmos\r\n'],
  ])('reads %s', (_what, text) => {
    const { rows, problems } = readRoster(text, CONTEXT)
    expect(problems).toEqual([])
    expect(rows[0]?.installation?.load.tank.nominalVolumeL).toBe(150.5)
    expect(rows[0]?.installation?.controller).toMatchObject({ kind: 'one-shot-rc', resistanceOhm: 6.8e6 })
  })
  it('names line, column, value and remedy of every problem', () => {
    const { problems } = readRoster(
      'unit,litres,lower_w,controller,minutes,email\n1,abc,3000,dial,90,\n1,150,3000,kettle,,x@y.example\n,150,3000,dial,99999,\n',
      CONTEXT,
    )
    const places = problems.map((problem) => `${problem.line} ${problem.column} ${problem.value}`)
    expect(places).toEqual(
      expect.arrayContaining(['2 litres abc', '3 unit 1', '3 controller kettle', '3 tenant ', '4 unit ', '4 minutes 99999']),
    )
    for (const problem of problems) expect(problem.message.length).toBeGreaterThan(15)
  })
  it('refuses an unknown column and a table without units', () => {
    expect(readRoster('unit,colour\n1,red\n', CONTEXT).problems).toMatchObject([{ line: 1, column: 'colour' }])
    expect(readRoster('floor\n1\n', CONTEXT).problems.map((problem) => problem.column)).toContain('unit')
  })
  it('names its defaults', () => {
    const { rows } = readRoster('unit,litres,lower_w,controller,minutes\n1,150,3000,dial,90\n', CONTEXT)
    expect(rows[0]?.defaults).toEqual(expect.arrayContaining(['set point 60 °C', 'standing loss of class C', 'dial tolerance 10 %']))
  })
})

describe('weekdaysOf, parseProgramme and parseShowers', () => {
  it('understands single days, spans over Sunday, lists and daily', () => {
    expect(weekdaysOf('Mon-Fri')).toEqual([0, 1, 2, 3, 4])
    expect(weekdaysOf('Sat-Mon')).toEqual([0, 5, 6])
    expect(weekdaysOf('Tue, Thu')).toEqual([1, 3])
    expect(weekdaysOf('daily')).toHaveLength(7)
    expect(weekdaysOf('Someday')).toBeNull()
  })
  it('takes an end before its start as the next morning', () => {
    expect(parseProgramme('22:30-05:00')).toEqual({ ok: true, value: [{ weekday: null, onMin: 1350, offMin: 1740 }] })
  })
  it('writes a week back as it was read', () => {
    const text = '06:45 1x8 Mon,Tue,Wed,Thu,Fri; 08:00 2x10 Sat,Sun'
    const parsed = parseShowers(text)
    expect(parsed.ok && formatShowers(parsed.value)).toBe(text)
  })
  it.each(['25:00-26:00', '5-6', 'all day'])('says what to write instead of “%s”', (text) => {
    expect(parseProgramme(text)).toMatchObject({ ok: false, message: expect.stringContaining('05:00-06:30') })
  })
})

describe('safeCell', () => {
  it('keeps a spreadsheet from running a cell, and numbers as they are', () => {
    expect(safeCell('=HYPERLINK("x")')).toBe('\'=HYPERLINK("x")')
    expect(safeCell('@cmd')).toBe("'@cmd")
    expect(safeCell('-12.5')).toBe('-12.5')
  })
})

describe('importRoster', () => {
  let db: Kysely<Database>
  let ours: OrgDb
  let propertyId: PropertyId
  beforeEach(async () => {
    db = await freshDatabase()
    ours = await makeLandlord(db)
    ;({ propertyId } = await makeBuilding(ours, empty))
  })

  it('adds every row with hardware, tenant and showers', async () => {
    const change = await importRoster(ours, { propertyId, text: TABLE, nowMs: NOW_MS })
    expect(change).toMatchObject({ added: 3, updated: 0 })
    expect((await listUnits(ours, propertyId)).map((unit) => unit.code)).toEqual(['1A', '1B', '2A'])
    expect((await listCurrentHardware(ours, propertyId)).size).toBe(3)
    expect(change.tenancies).toHaveLength(3)
  })
  it('writes nothing when one row is wrong', async () => {
    await expect(importRoster(ours, { propertyId, text: `${TABLE}2B,x,,,,,,,,,,,,\n`, nowMs: NOW_MS })).rejects.toMatchObject({
      code: 'invalid',
    })
    expect(await listUnits(ours, propertyId)).toEqual([])
  })
  it('updates by unit code, and adds no revision for what is the same', async () => {
    await importRoster(ours, { propertyId, text: TABLE, nowMs: NOW_MS })
    const change = await importRoster(ours, { propertyId, text: TABLE.replace('dial,90', 'dial,120'), nowMs: NOW_MS + 1 })
    expect(change).toMatchObject({ added: 0, updated: 3, tenancies: [] })
    const revisions = [...(await listCurrentHardware(ours, propertyId)).values()].map((record) => record.revision)
    expect(revisions.sort()).toEqual([1, 1, 2])
  })
  it('knows a tenancy that is still to come, so that importing twice adds it once', async () => {
    const text = 'unit,tenant,email,from\n9Z,Dov,dov@tenants.example,2027-03-01\n'
    expect((await importRoster(ours, { propertyId, text, nowMs: NOW_MS })).tenancies).toHaveLength(1)
    expect((await importRoster(ours, { propertyId, text, nowMs: NOW_MS + 1 })).tenancies).toEqual([])
    expect(await db.selectFrom('tenancy').selectAll().execute()).toHaveLength(1)
  })
  it('reads its own export back with no new unit and no new revision', async () => {
    await importRoster(ours, { propertyId, text: TABLE, nowMs: NOW_MS })
    const property = await findProperty(ours, propertyId)
    const text = await exportRoster(ours, property as NonNullable<typeof property>, NOW_MS)
    expect(await importRoster(ours, { propertyId, text, nowMs: NOW_MS + 1 })).toMatchObject({ added: 0, updated: 3, tenancies: [] })
    expect([...(await listCurrentHardware(ours, propertyId)).values()].every((record) => record.revision === 1)).toBe(true)
  })
  it("answers not found for another organisation's property, and forbids other roles", async () => {
    const theirs = await makeLandlord(db)
    await expect(importRoster(theirs, { propertyId, text: TABLE, nowMs: NOW_MS })).rejects.toMatchObject({ code: 'not-found' })
    const owner = await scopeFor(db, { organisationId: ours.scope.organisationId, personId: await makePerson(db), roles: ['owner'] })
    await expect(importRoster(owner, { propertyId, text: TABLE, nowMs: NOW_MS })).rejects.toMatchObject({ code: 'forbidden' })
  })
})

/** Reading a roster: every problem by line and column with its remedy, every default by its name. */
import { describe, expect, it } from 'vitest'
import { safeCell, sampleRoster } from '#lib/roster/columns.ts'
import { formatProgramme, formatShowers, parseProgramme, parseShowers, weekdaysOf } from '#lib/roster/programme-text.ts'
import { readRoster } from '#lib/roster/read-roster.ts'

const CONTEXT = { supplyVoltageV: 230, today: '2026-12-01', known: new Map() }
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
  it.each([
    ['blank lines and both line endings', 'unit,floor\r\n\r\n1,0\n2,x\r\n', 4],
    ['a cell with a line break before it', 'unit,floor,stack\n1,0,"A\nwest"\n2,x,B\n', 4],
  ])('counts lines as an editor shows them, with %s', (_what, text, line) => {
    expect(readRoster(text, CONTEXT).problems).toMatchObject([{ line, column: 'floor', value: 'x' }])
  })
  it('reads an empty cell between two tabs as empty', () => {
    expect(readRoster('unit\tfloor\tstack\n1\t\tA\n', CONTEXT).rows).toMatchObject([{ code: '1', floor: null, stack: 'A' }])
  })
  it('refuses a row that an unquoted comma has shifted', () => {
    const { problems } = readRoster('unit,tenant,email\n1,Brackwater, Ada,ada@tenants.example\n', CONTEXT)
    expect(problems.map((problem) => problem.message).join()).toContain('4 cells, the header 3')
  })
  it.each([
    ['a column that stands twice', 'unit,floor,floor\n1,0,1\n', 'twice'],
    ['a letter that is not UTF-8', 'unit,tenant,email\n1,Z\uFFFDe,z@tenants.example\n', 'UTF-8'],
    ['a spreadsheet instead of a table', 'PK\u0003\u0004\0\0', 'CSV UTF-8'],
    ['a quote that is not closed', 'unit,stack\n1,"A\n', 'not a readable table'],
    ['nothing at all', '', 'empty'],
    ['a code that cannot stand in an address', 'unit\n../x\n', 'begins with a letter'],
    ['a code that is a page of the product', 'unit\nImport\n', 'taken'],
    ['a day that does not exist', 'unit,tenant,email,from\n1,Ada,ada@tenants.example,2026-02-30\n', 'no such day'],
    [
      'minutes of a timer that has none',
      'unit,litres,lower_w,controller,minutes,programme\n1,150,3000,switch,90,05:00-06:00\n',
      'does not belong',
    ],
    ['showers where nobody lives', 'unit,showers\n1,07:00 1x8 daily\n', 'Nobody lives here'],
    ['a thousands separator', 'unit,litres,lower_w,controller,minutes\n1,150,"3,000",dial,90\n', 'thousands'],
  ])('refuses %s and says what to do', (_what, text, words) => {
    const { problems } = readRoster(text, CONTEXT)
    expect(problems.map((problem) => problem.message).join(' ')).toContain(words)
  })
  it('takes tolerances, supply and leakage of a monostable from the table', () => {
    const head = 'unit,litres,lower_w,controller,r_megohm,r_tolerance_pct,c_microfarad,c_tolerance_pct,leakage,timer_ic,timer_v'
    const controllerOf = (leakage: string) =>
      readRoster(`${head}\n1,150,3000,rc,6.8,1,330,10,${leakage},bipolar,9\n`, CONTEXT).rows[0]?.installation?.controller
    expect(controllerOf('400 megohm')).toEqual({
      kind: 'one-shot-rc',
      resistanceOhm: 6.8e6,
      resistanceToleranceFraction: 0.01,
      capacitanceF: 330e-6,
      capacitanceToleranceFraction: 0.1,
      supplyV: 9,
      icFamily: 'bipolar',
      leakage: { kind: 'resistance', leakageOhm: 400e6 },
    })
    expect(controllerOf('electrolytic 25 v')).toMatchObject({ leakage: { kind: 'series', series: 'electrolytic', ratedV: 25 } })
    expect(controllerOf('0.2 ua')).toMatchObject({ leakage: { kind: 'current', leakageA: 0.2e-6 } })
  })
  it('takes a tank in US gallons, 3.785 L each (NIST SP 811, B.8)', () => {
    const { rows } = readRoster('unit,gallons,lower_w,controller,minutes\n1,50,4500,dial,90\n', CONTEXT)
    expect(rows[0]?.installation?.load.tank.nominalVolumeL).toBeCloseTo(189.3, 1)
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
  it('writes a programme back with equal hours once', () => {
    const text = '05:00-06:30 Mon,Tue,Wed,Thu,Fri; 17:00-18:00 daily'
    const parsed = parseProgramme(text)
    expect(parsed.ok && formatProgramme(parsed.value)).toBe(text)
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

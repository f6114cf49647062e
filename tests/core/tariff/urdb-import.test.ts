/** Rate records read: published ones in every field they use, and refusals by field. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { readUrdb } from '#lib/core/tariff/urdb-import.ts'
import { type Rate, readRecord } from './cases.ts'

const OPTIONS = { currency: 'USD', minorPerMajor: 100, effectiveFrom: '2024-01-01' }
const hours = (period: number) => Array.from({ length: 12 }, () => Array.from({ length: 24 }, () => period))
const BASE: Rate = {
  name: 'base',
  utility: 'Tidewater Light',
  energyratestructure: [[{ max: 500, rate: 0.1 }, { rate: 0.2 }]],
  energyweekdayschedule: hours(0),
  energyweekendschedule: hours(0),
}
const FLAT = { flatdemandstructure: [[{ rate: 4 }]], flatdemandmonths: Array(12).fill(0), demandwindow: 15 }
const read = (record: unknown, options = OPTIONS) => {
  const outcome = readUrdb(record, options)
  if (outcome.status !== 'read') throw new Error(JSON.stringify(outcome.problems))
  return outcome
}
const refusals = (record: unknown) => {
  const outcome = readUrdb(record, OPTIONS)
  return outcome.status === 'refused' ? outcome.problems.map((problem) => problem.field) : []
}

describe('readUrdb', () => {
  it.each([
    // The first day of a month or year in each record, whichever zone its seconds were meant in.
    ['pge-e19-2019.urdb.json', '2019-05-01', [9.593, 11.253, 8.837, 11.883, 16.484]],
    ['psco-rd-2018.urdb.json', '2018-01-01', [4.81085]],
    ['fpl-rs1.urdb.json', '2015-06-01', [8.721]],
    ['entergy-lps-tou-2018.urdb.json', '2018-01-01', [3.855, 3.29, 2.968, 2.812]],
    ['psco-spvtou-b-2019.urdb.json', '2019-01-01', [4.21641, 13.94093]],
    ['south-central-lp1.urdb.json', '2012-05-01', [4.9, 4.2]],
  ] as const)('reads %s, in force from %s, rate and adjustment added', (file, effectiveFrom, prices) => {
    const { version } = read(readRecord(file))
    expect(version.effectiveFrom).toBe(effectiveFrom)
    // Exactly the decimals printed: no binary remainder.
    expect(version.energyPeriods.map((tiers) => tiers[0]?.priceMinorPerKwh)).toEqual(prices)
  })
  it('reads the bare rate, an item of a list and a wrapped rate alike', () => {
    const { version } = read(BASE)
    expect(read({ items: [BASE] }).version).toEqual(version)
    expect(read({ rate: BASE }).version).toEqual(version)
  })
  it('says what it leaves out and what it assumes', () => {
    const { warnings } = read({
      items: [
        {
          ...BASE,
          ...FLAT,
          demandwindow: undefined,
          enddate: 1_561_874_400,
          fixedchargeeaaddl: 2,
          servicetype: 'Delivery',
          peakkwcapacitymin: 500,
        },
        BASE,
      ],
    })
    expect(warnings).toHaveLength(6)
    expect(warnings.join(' ')).toMatch(/2 rates.*demandwindow.*2019-06-30.*fixedchargeeaaddl.*delivery.*from 500 kW/s)
    expect(read({ ...BASE, energyratestructure: [[{ rate: 0.1, sell: 0.04 }]] }).warnings.join(' ')).toMatch(/sell/)
  })
  it('treats a last tier as open whatever bound it states', () => {
    const { version } = read({
      ...BASE,
      energyratestructure: [
        [
          { max: 300, rate: 0.1 },
          { max: 0, rate: 0.2 },
        ],
      ],
    })
    expect(version.energyPeriods[0]?.map((tier) => tier.max)).toEqual([300, null])
  })
  it('reads a start that is written as text, and falls back to the day it is given', () => {
    expect(read({ ...BASE, startdate: '2014-05-01 00:00:00' }).version.effectiveFrom).toBe('2014-05-01')
    expect(read(BASE).version.effectiveFrom).toBe('2024-01-01')
  })
  it.each([
    [{ fixedchargefirstmeter: 12, fixedchargeunits: '$/month' }, { fixed: { amountMinor: 1_200, per: 'month' } }],
    [{ fixedchargefirstmeter: 0.5, fixedchargeunits: '$/day' }, { fixed: { amountMinor: 50, per: 'day' } }],
    [{ fixedchargefirstmeter: 90, fixedchargeunits: '$/year' }, { fixed: { amountMinor: 9_000, per: 'year' } }],
    [{ fixedmonthlycharge: 468.6 }, { fixed: { amountMinor: 46_860, per: 'month' } }],
    [{ mincharge: 60, minchargeunits: '$/month' }, { minimum: { amountMinor: 6_000, per: 'month' } }],
    [{ minmonthlycharge: 25 }, { minimum: { amountMinor: 2_500, per: 'month' } }],
    [{ annualmincharge: 300 }, { minimum: { amountMinor: 30_000, per: 'year' } }],
    [{ fueladjustmentsmonthly: Array(12).fill(0.01) }, { fuelAdjustmentMinorPerKwh: Array(12).fill(1) }],
    [{ ...FLAT, lookbackpercent: 0.8, lookbackrange: 11 }, { lookback: { fraction: 0.8, months: { kind: 'range', count: 11 } } }],
    [{ ...FLAT, demandwindow: 30 }, { demandWindowMin: 30 }],
  ])('reads the charges of %j', (fields, expected) => {
    expect(read({ ...BASE, ...fields }).version).toMatchObject(expected)
  })
  it.each([
    ['coincidentratestructure', { coincidentratestructure: [[{ rate: 9 }]] }],
    ['coincidentschedule', { coincidentschedule: hours(1) }],
    ['demandratchetpercentage', { demandratchetpercentage: Array(12).fill(0.5) }],
    ['demandreactivepowercharge', { demandreactivepowercharge: 0.2 }],
    ['flatdemandunit', { ...FLAT, flatdemandunit: 'hp' }],
    [
      'demandrateunit',
      { demandratestructure: [[{ rate: 3 }]], demandweekdayschedule: hours(0), demandweekendschedule: hours(0), demandrateunit: 'kVA' },
    ],
    ['demandwindow', { ...FLAT, demandwindow: 5 }],
    ['flatdemandmonths', { ...FLAT, flatdemandmonths: [0] }],
    ['flatdemandstructure[0][0].rate', { ...FLAT, flatdemandstructure: [[{ max: 4 }]] }],
    ['demandweekendschedule', { demandratestructure: [[{ rate: 3 }]], demandweekdayschedule: hours(0), demandweekendschedule: hours(1) }],
    ['lookbackpercent', { ...FLAT, lookbackpercent: 35, lookbackrange: 11 }],
    ['lookbackpercent', { lookbackpercent: 0.35, lookbackrange: 11 }],
    ['lookbackmonths', { ...FLAT, lookbackpercent: 0.35 }],
    ['lookbackrange', { ...FLAT, lookbackpercent: 0.35, lookbackrange: 1.5 }],
    ['startdate', { startdate: '2026-02-31' }],
    ['startdate', { startdate: 1e15 }],
    ['fixedchargeunits', { fixedchargefirstmeter: 3, fixedchargeunits: '$/fortnight' }],
    ['minchargeunits', { mincharge: 3, minchargeunits: '$/kW' }],
    ['annualmincharge', { mincharge: 3, annualmincharge: 100 }],
    ['fueladjustmentsmonthly', { fueladjustmentsmonthly: [0.1] }],
    ['energyweekdayschedule', { energyweekdayschedule: hours(2) }],
    ['energyweekendschedule', { energyweekendschedule: Array.from({ length: 12 }, () => Array(25).fill(0)) }],
    ['energyratestructure', { energyratestructure: [] }],
    ['energyratestructure[0]', { energyratestructure: [[]] }],
    ['energyratestructure[0][0].rate', { energyratestructure: [[{ sell: 0.05 }]] }],
    ['energyratestructure[0][0].rate', { energyratestructure: [[{ rate: '0.05' }]] }],
    ['energyratestructure[0][0].unit', { energyratestructure: [[{ rate: 0.05, unit: 'MWh' }]] }],
    ['energyratestructure[0][1].max', { energyratestructure: [[{ max: 300, rate: 0.1 }, { max: 200, rate: 0.2 }, { rate: 0.3 }]] }],
    // Charges and bounds that are there and cannot be read would be missing from every bill.
    ['fixedchargefirstmeter', { fixedchargefirstmeter: '12' }],
    ['fixedmonthlycharge', { fixedmonthlycharge: '12' }],
    ['mincharge', { mincharge: '3' }],
    ['annualmincharge', { annualmincharge: '100' }],
    ['annualmincharge', { annualmincharge: -100 }],
    ['energyratestructure[0][0].max', { energyratestructure: [[{ max: '300', rate: 0.1 }, { rate: 0.2 }]] }],
    ['energyratestructure[0][0].max', { energyratestructure: [[{ rate: 0.1 }, { rate: 0.2 }]] }],
    // Steps of 8 minutes and 34.3 seconds.
    ['energyweekdayschedule', { energyweekdayschedule: Array.from({ length: 12 }, () => Array(168).fill(0)) }],
    [
      'energyratestructure[0].unit',
      { energyratestructure: [[{ max: 300, rate: 0.1, unit: 'kWh' }, { max: 400, rate: 0.2, unit: 'kWh/kW' }, { rate: 0.3 }]] },
    ],
  ])('refuses what it cannot bill and names %s', (field, fields) => {
    expect(refusals({ ...BASE, ...fields })).toContain(field)
  })
  it('does not refuse a field that is present and empty', () => {
    const empty = {
      coincidentratestructure: [[{ rate: 0 }]],
      coincidentrateschedule: hours(0),
      demandratchetpercentage: Array(12).fill(0),
      lookbackpercent: 0,
    }
    expect(refusals({ ...BASE, ...empty })).toEqual([])
  })
  it('answers any JSON with a rate or a refusal that has a message, never with an exception', () => {
    const broken = fc.record(
      Object.fromEntries(
        [
          ...Object.keys(readRecord('pge-e19-2019.urdb.json')),
          'items',
          'rate',
          'mincharge',
          'lookbackpercent',
          'fueladjustmentsmonthly',
        ].map((field) => [
          field,
          fc.oneof(fc.constant((readRecord('pge-e19-2019.urdb.json') as Rate)[field]), fc.jsonValue({ maxDepth: 3 })),
        ]),
      ),
      { requiredKeys: [] },
    )
    fc.assert(
      fc.property(fc.oneof(broken, fc.jsonValue()), (json) => {
        const outcome = readUrdb(json, OPTIONS)
        if (outcome.status === 'refused') expect(outcome.problems.every((problem) => problem.message.length > 10)).toBe(true)
        expect(outcome.status === 'read' || outcome.problems.length > 0).toBe(true)
      }),
      { numRuns: 400 },
    )
  })
})

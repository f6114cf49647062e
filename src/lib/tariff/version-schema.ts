/** What saving a version sends, with its limits. What it means is checked by the core afterwards. */
import { z } from 'zod'
import type { TariffVersion } from '#lib/core/tariff/types.ts'

const text = z.string().max(120, 'At most 120 characters.')
const amount = z.number()
const list = <T extends z.ZodType>(of: T, most: number) => z.array(of).max(most, `At most ${most}.`)
/** A day in 5-minute steps is the finest. */
const grid = list(list(z.number().int().nonnegative(), 288), 12)
const twelve = list(z.number(), 12)
const charge = z.object({ amountMinor: amount, per: z.enum(['month', 'day', 'year']) }).nullable()
const demandTiers = list(z.object({ maxKw: z.number().nullable(), priceMinorPerKw: amount }), 24)

const versionSchema = z.object({
  name: text,
  utility: text,
  effectiveFrom: z.string().max(10),
  currency: z.string().length(3),
  minorPerMajor: z.number().positive(),
  energyPeriods: list(
    list(
      z.object({ max: z.number().nullable(), unit: z.enum(['kWh', 'kWh daily', 'kWh/kW', 'kWh/kW daily']), priceMinorPerKwh: amount }),
      24,
    ),
    26,
  ),
  periodNames: list(text, 26).exactOptional(),
  seasons: list(z.object({ name: text, startsOn: z.string().max(5) }), 12).exactOptional(),
  weekdayGrid: grid,
  weekendGrid: grid,
  specialDays: list(z.object({ day: z.string().max(10), dayType: text }), 400),
  extraDayTypes: list(z.object({ name: text, energyGrid: grid, demandGrid: grid.nullable() }), 6).exactOptional(),
  flatDemand: z.object({ tiersByStructure: list(demandTiers, 24), structureByMonth: twelve }).nullable(),
  periodDemand: z
    .object({ tiersByPeriod: list(demandTiers, 26), periodNames: list(text, 26).exactOptional(), weekdayGrid: grid, weekendGrid: grid })
    .nullable(),
  demandWindowMin: z.literal([15, 30, 60]),
  lookback: z
    .object({
      fraction: z.number().min(0).max(1),
      months: z.union([
        z.object({ kind: z.literal('range'), count: z.number().int().min(1).max(24) }),
        z.object({ kind: z.literal('months'), counts: list(z.boolean(), 12) }),
      ]),
    })
    .exactOptional(),
  coincidentDemand: list(
    z.object({ priceMinorPerKw: amount, hours: list(z.object({ startsAtMs: z.number(), endsAtMs: z.number() }), 400) }),
    24,
  ).exactOptional(),
  fixed: charge,
  minimum: charge,
  fuelAdjustmentMinorPerKwh: twelve.nullable(),
}) satisfies z.ZodType<TariffVersion>

export const saveVersionSchema = z.object({
  /** Of the tariff as the writer has seen it. */
  revision: z.number().int().nonnegative(),
  /** Why; asked for where it changes days that have passed, or a version that is there. */
  reason: z.string().trim().max(500, 'At most 500 characters.'),
  version: versionSchema,
})

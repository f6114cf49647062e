/** The restart roster of a property: its heaters as recorded, the service as it is or as somebody limits it, from when the power is back. */
import { z } from 'zod'
import type { OrgDb } from '#db/org-db.ts'
import { listCurrentHardware } from '#db/queries/hardware.ts'
import type { Property } from '#db/queries/property.ts'
import { listUnits } from '#db/queries/unit.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { inletC } from '#lib/core/tank/inlet.ts'
import { civilOf, instantOf } from '#lib/core/time/civil.ts'
import { durationOf } from '#lib/evaluation/unit-day.ts'
import { siteOf } from '#lib/evaluation/load-inputs.server.ts'
import { serviceLimitW } from '#lib/evaluation/service-load.ts'
import { landlordsOf } from '#lib/tip/whom-to-call.server.ts'
import { restartPage } from './restart.ts'

const STEP_MIN = 15
const KW = { min: 0.5, max: 10_000 } as const

/** What the address asks; anything that cannot be is left out. */
const askedSchema = z.object({
  at: z
    .string()
    .regex(/^([01]\d|2[0-3]):[0-5]\d$/)
    .optional()
    .catch(undefined),
  limit: z.coerce.number().min(KW.min).max(KW.max).optional().catch(undefined),
})

export async function loadRestart(
  db: OrgDb,
  { property, query, nowMs }: { readonly property: Property; readonly query: URLSearchParams; readonly nowMs: number },
) {
  requireRole(db, ['landlord'], 'plan starts')
  const site = await siteOf(db, property)
  const { at, limit } = askedSchema.parse(Object.fromEntries([...query].filter(([, value]) => value !== '')))
  const { day, minuteOfDay } = civilOf(nowMs, property.zone)
  const minute = at ? Number(at.slice(0, 2)) * 60 + Number(at.slice(3)) : Math.ceil(minuteOfDay / STEP_MIN) * STEP_MIN
  const backAtMs = instantOf(day, minute, property.zone)
  const hardware = await listCurrentHardware(db, property.id)
  const all = await listUnits(db, property.id)
  const units = all.flatMap((unit) => {
    const record = hardware.get(unit.id)
    if (!record) return []
    return [{ unitId: unit.id, code: unit.code, installation: record.installation, duration: durationOf(record) }]
  })
  const fullLimitW = serviceLimitW(site)
  const limitW = limit === undefined ? fullLimitW : Math.min(limit * 1_000, fullLimitW)
  return {
    property,
    backAtMs,
    limitKw: limitW / 1_000,
    fullLimitKw: fullLimitW / 1_000,
    baseKw: site.baseLoadW / 1_000,
    unknown: all.length - units.length,
    units: all.length,
    landlords: await landlordsOf(db),
    roster: restartPage({
      units,
      supplyVoltageV: site.supplyVoltageV,
      inletC: inletC(site.climate, day),
      limitW,
      baseLoadW: site.baseLoadW,
      backAtMs,
    }),
  }
}

export type RestartView = Awaited<ReturnType<typeof loadRestart>>

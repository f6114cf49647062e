/** One flag: `{ "state": "dismissed", "reason", "untilDay" }` dismisses it, `{ "state": "open" }` takes that back. */
import { z } from 'zod'
import { dismissFlag } from '#lib/flag/dismiss-flag.server.ts'
import { reopenFlag } from '#lib/flag/reopen-flag.server.ts'
import { apiRoute } from '#lib/http/api-route.ts'
import { parseInput } from '#lib/http/parse.ts'

const change = z.looseObject({ state: z.enum(['dismissed', 'open'], 'The state is "dismissed" or "open".') })

export const PATCH = apiRoute(async ({ db, params, nowMs, readJson }) => {
  const body = parseInput(change, await readJson())
  const input = { ...body, flagId: params.flag ?? '' }
  await (body.state === 'dismissed' ? dismissFlag(db, { input, nowMs }) : reopenFlag(db, { input, nowMs }))
  return { state: body.state }
})

/** Figures side by side and the effect of a move, in words. Pure; shared with the browser. */
import type { MoveEffect } from '#lib/core/plan/types.ts'
import { counted, formatMoney } from '#lib/figures.ts'
import type { Figures } from './compare.ts'
import type { PlanDraft } from './draft-plan.server.ts'
import { instantAt, type MovableRun, startMsOf } from './types.ts'
import { byHowMuch, clockAt, instantWords, refusal, startWords } from './words.ts'
import type { FoundPlan } from './worker-messages.ts'

export interface Compared {
  readonly label: string
  readonly today: string
  readonly plan: string
  readonly yours: string
}

export const kw = (powerKw: number): string => `${powerKw.toFixed(powerKw < 100 ? 1 : 0)} kW`
const percent = (fraction: number): string => `${(fraction * 100).toFixed(fraction < 0.0995 ? 1 : 0)} %`

/** How far at most from the best possible, for the starts that the bound is of. */
export function gapWords({ bound }: Pick<FoundPlan, 'bound'>, figures: Figures, draft: Pick<PlanDraft, 'currency'>): string {
  const slackMinor = Math.max(0, figures.weighedMinor - bound.costAtLeastMinor)
  const share = slackMinor / Math.max(Math.abs(figures.weighedMinor), 1e-9)
  return `${percent(share)}, ${formatMoney(Math.ceil(slackMinor), draft.currency)}`
}

export interface Sides {
  readonly draft: PlanDraft
  readonly found: FoundPlan
  readonly yours: Figures
  /** How many starts change. */
  readonly planChanges: number
  readonly yourChanges: number
  /** Units that your starts leave cold or unsure. */
  readonly yourCold: number
  /** Needs that have no start under the limit. */
  readonly unserved: number
}

export function compared({ draft, found, yours, planChanges, yourChanges, yourCold }: Sides): readonly Compared[] {
  const { today, figures } = found
  const money = (amountMinor: number | null) =>
    amountMinor === null ? 'no price known' : formatMoney(Math.round(amountMinor), draft.currency)
  const row = (label: string, of: (one: Figures) => string): Compared => ({ label, today: of(today), plan: of(figures), yours: of(yours) })
  const warm = (more: number) => `${draft.wantedUnits - draft.coldUnits.length - more} of ${draft.wantedUnits}`
  return [
    row('Cost in all', ({ costMinor }) => money(costMinor)),
    row('Energy', ({ energyMinor }) => money(energyMinor)),
    row('Demand charge that the runs add', ({ demandMinor }) => money(demandMinor)),
    row('Heat lost by waiting', ({ standingLossMinor }) => money(standingLossMinor)),
    row(
      'Highest load, every run at its longest',
      (one) => `${kw(one.peakKw)} at ${clockAt(instantAt(draft.grid, one.peakSlot), draft.zone)}`,
    ),
    row(`Against the limit of ${kw(today.limitKw)}`, (one) =>
      one.overSlots.length === 0
        ? `${kw(Math.max(0, one.limitKw - one.peakKw))} to spare`
        : `passed by ${kw(one.peakKw - one.limitKw)}, for ${one.overSlots.length * draft.grid.slotMin} min in all`,
    ),
    { label: 'Units warm on time', today: warm(0), plan: warm(0), yours: warm(yourCold) },
    { label: 'Starts that change', today: '—', plan: String(planChanges), yours: String(yourChanges) },
    {
      label: 'From the best possible, at most',
      today: '—',
      plan: gapWords(found, figures, draft),
      yours: gapWords(found, yours, draft),
    },
  ]
}

/** The answer first: what is wrong as things stand and what the plan makes of it. */
export function answerWords({ draft, found, unserved }: Pick<Sides, 'draft' | 'found' | 'unserved'>): string {
  const { today, figures } = found
  const saved = today.costMinor === null || figures.costMinor === null ? null : Math.round(today.costMinor) - Math.round(figures.costMinor)
  const load =
    today.overSlots.length === 0
      ? `The highest load goes from ${kw(today.peakKw)} to ${kw(figures.peakKw)}`
      : figures.overSlots.length === 0
        ? `The limit, passed now by ${kw(today.peakKw - today.limitKw)}, is kept`
        : `The limit stays passed by ${kw(figures.peakKw - figures.limitKw)}; now it is ${kw(today.peakKw - today.limitKw)}`
  const money =
    saved === null
      ? ''
      : saved === 0
        ? ', at the same cost'
        : `, for ${formatMoney(Math.abs(saved), draft.currency)} ${saved > 0 ? 'less' : 'more'}`
  return `${load}${money}${unserved === 0 ? '' : `; ${counted(unserved, 'start')} under the limit ${unserved === 1 ? 'is' : 'are'} missing`}.`
}

/** What moving a run would do, said once it is there. */
export function effectWords(effect: MoveEffect, { draft, run }: { readonly draft: PlanDraft; readonly run: MovableRun }): string {
  const startsAtMs = startMsOf(draft.grid, run, effect.toSlot)
  const where = `${run.code} at ${startWords(startsAtMs, run.day, draft.zone)}, ${fromToday(run, startsAtMs)}`
  const changeMinor = Math.round(effect.costChange.energyMinor + effect.costChange.demandMinor + effect.costChange.standingLossMinor)
  const cost = !draft.isPriced
    ? ''
    : changeMinor === 0
      ? ' The same cost.'
      : ` ${formatMoney(Math.abs(changeMinor), draft.currency)} ${changeMinor > 0 ? 'more' : 'less'} than where it was.`
  const over = effect.over
    .map(({ overKw, atSlot }) => ` Passes the limit by ${kw(overKw)} at ${clockAt(instantAt(draft.grid, atSlot), draft.zone)}.`)
    .join('')
  const not = effect.allowed ? '' : ` Not possible: ${refusal(run, startsAtMs, draft.zone)}`
  return `${where}.${not}${over}${cost}`
}

export const fromToday = (run: MovableRun, startsAtMs: number): string =>
  startsAtMs === run.todayMs ? 'as it stands' : byHowMuch(run.todayMs, startsAtMs)

/** Everything about a run's start that an ear needs. */
export const startText = (run: MovableRun, startsAtMs: number, zone: string): string =>
  `${startWords(startsAtMs, run.day, zone)}, ${fromToday(run, startsAtMs)}; start by ${startWords(run.latestMs, run.day, zone)}, ready by ${clockAt(run.readyByAtMs, zone)}`

export const peakWords = (figures: Figures, { grid, zone }: Pick<PlanDraft, 'grid' | 'zone'>): string =>
  `${kw(figures.peakKw)} at ${instantWords(instantAt(grid, figures.peakSlot), zone)}`

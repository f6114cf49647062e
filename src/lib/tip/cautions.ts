/** The hazards a tenant is told of: what it is, what it can do, what to do, who. The card and the mail say the same. */
import type { Flag } from '#db/queries/flag.ts'
import type { Installation } from '#lib/core/hardware/types.ts'
import { GROWTH_RANGE_C } from '#lib/core/hygiene/policies.ts'
import { assessScald } from '#lib/core/hygiene/scald.ts'

export interface TenantCaution {
  readonly kind: 'timer' | 'scald' | 'growth'
  readonly text: string
}

/** Whether somebody presses, or a clock switches. */
export const isPressed = (installation: Pick<Installation, 'controller'> | undefined): boolean => {
  const kind = installation?.controller.kind
  return kind !== 'time-switch' && kind !== 'supplier-contactor'
}

interface CautionCase {
  readonly installation: Installation | null
  readonly flags: readonly Pick<Flag, 'kind'>[]
}

export function cautionsFor({ installation, flags }: CautionCase): readonly TenantCaution[] {
  const has = (kind: Flag['kind']) => flags.some((flag) => flag.kind === kind)
  const scald = installation && scaldWords(installation)
  return [
    ...(has('may-never-stop')
      ? [
          {
            kind: 'timer' as const,
            text: 'This timer may not stop by itself, and the water may get very hot. Look that it has gone off after your shower. If it has not, switch the heater off where you can do so without opening anything, and call your landlord.',
          },
        ]
      : []),
    ...(scald ? [{ kind: 'scald' as const, text: scald }] : []),
    ...(has('growth-range')
      ? [
          {
            kind: 'growth' as const,
            text: `Some of this water stays between about ${GROWTH_RANGE_C.from} and ${GROWTH_RANGE_C.to} °C for hours, where Legionella can grow; breathed in with spray it can make people ill. Your landlord has this finding: ask them before you heat less.`,
          },
        ]
      : []),
  ]
}

function scaldWords({ load }: Installation): string | null {
  const { setPointC, mixingValveC } = load.tank
  const { atRisk, atTapC, secondsToBurn } = assessScald(setPointC, mixingValveC)
  if (!atRisk) return null
  const burns = secondsToBurn === null ? 'can scald' : `burns skin in ${secondsToBurn} s`
  return `Water from this tank is ${Math.round(atTapC)} °C at the tap and ${burns}. Mix before children use it.`
}

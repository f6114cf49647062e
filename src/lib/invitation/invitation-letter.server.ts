/** The letter that carries an invitation: written at the first sending and at each further one, with a new link every time. */
import type { InvitationId, PropertyId, UnitId } from '#db/ids.ts'
import type { Role } from '#db/enums.ts'
import type { OrgTrx } from '#db/org-db.ts'
import { processConfig } from '#lib/config.server.ts'
import { letter } from '#lib/mail/letter.ts'
import { queueMessage } from '#lib/mail/queue-message.server.ts'
import { INVITATION_DAYS } from './schemas.ts'

const WHAT: Readonly<Record<Role, string>> = {
  landlord: 'to run its buildings',
  tenant: 'to set when you want hot water, and to be told when to start your heater',
  electrician: 'to see the units that need you and record what is installed',
  owner: 'to receive one page a month about cost, energy and what was fixed',
}

export interface InvitationLetter {
  readonly id: InvitationId
  readonly email: string
  readonly name: string
  readonly role: Role
  readonly property: { readonly id: PropertyId; readonly name: string } | null
  readonly unitId: UnitId | null
  readonly organisationName: string
  readonly token: string
  /** Distinguishes this sending from the others of the same invitation. */
  readonly cause: string
  readonly nowMs: number
  /** When the link stops working. */
  readonly expiresAtMs: number
}

export async function queueInvitation(trx: OrgTrx, invitation: InvitationLetter): Promise<void> {
  const { email, name, role, property, unitId, organisationName, token, cause, nowMs, expiresAtMs } = invitation
  const { text, html } = letter({
    title: `${organisationName} invites you`,
    paragraphs: [`Hello ${name}, ${organisationName} invites you ${WHAT[role]}${property ? ` at ${property.name}` : ''}.`],
    actions: [{ label: 'Accept the invitation', url: `${processConfig().baseUrl}/invitation/${token}` }],
    footer: [`The link works once, for ${INVITATION_DAYS} days.`, 'If you do not know who this is, ignore this mail.'],
  })
  await queueMessage(trx, {
    propertyId: property?.id ?? null,
    unitId,
    personId: null,
    toEmail: email,
    kind: 'invitation',
    cause,
    subject: `Accept ${organisationName}’s invitation to Dwellhour`,
    text,
    html,
    secrets: [{ token }],
    nowMs,
    expiresAtMs,
  })
}

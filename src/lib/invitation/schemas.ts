/** What an invitation and its acceptance may hold. */
import { z } from 'zod'
import { emailField, nameField, passwordField } from '#lib/account/schemas.ts'

export const INVITATION_DAYS = 14

export const inviteSchema = z.object({
  email: emailField,
  name: nameField,
  role: z.enum(['landlord', 'tenant', 'electrician', 'owner'], { error: 'Choose a role.' }),
  propertyId: z.string().nullable(),
  tenancyId: z.string().nullable(),
})

export const acceptSchema = z.object({ name: nameField, password: passwordField })

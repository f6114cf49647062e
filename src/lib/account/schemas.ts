/** What may be entered about an account: shared by forms and verbs. */
import { z } from 'zod'

export const PASSWORD_LENGTH = { min: 12, max: 200 } as const

/** Keyboards of phones leave a space after a completed address and a capital before it. */
export const emailField = z
  .string()
  .trim()
  .toLowerCase()
  .max(254, 'An e-mail address has at most 254 characters.')
  .pipe(z.email('Enter an e-mail address, like name@example.org.'))
export const nameField = z.string().trim().min(1, 'Enter a name.').max(100, 'A name has at most 100 characters.')
export const passwordField = z
  .string()
  .min(PASSWORD_LENGTH.min, `Choose at least ${PASSWORD_LENGTH.min} characters; a short sentence is good.`)
  .max(PASSWORD_LENGTH.max, `A password has at most ${PASSWORD_LENGTH.max} characters.`)

export const signUpSchema = z.object({ name: nameField, email: emailField, password: passwordField })
export const signInSchema = z.object({ email: emailField, password: z.string().min(1, 'Enter your password.').max(PASSWORD_LENGTH.max) })
export const resetRequestSchema = z.object({ email: emailField })
export const newPasswordSchema = z.object({ token: z.string().min(20), password: passwordField })

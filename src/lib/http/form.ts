/** Form data as plain text fields; files are left out. */
export const formFields = (form: FormData): Record<string, string> =>
  Object.fromEntries([...form.entries()].flatMap(([name, value]) => (typeof value === 'string' ? [[name, value] as const] : [])))

/** A path of our own to go to after signing in; anything else is `null`. */
export function safeNext(next: string | null): string | null {
  return next && /^\/(?![/\\])[^\s]*$/.test(next) && !next.startsWith('/sign-') ? next : null
}

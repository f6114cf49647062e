/** Form data as plain text fields; files are left out. */
export const formFields = (form: FormData): Record<string, string> =>
  Object.fromEntries([...form.entries()].flatMap(([name, value]) => (typeof value === 'string' ? [[name, value] as const] : [])))

/** What was typed into a form that came back with a problem, so that nobody types it twice; passwords are typed again. */
export async function typedIn(request: Request): Promise<Readonly<Record<string, string>>> {
  if (request.method !== 'POST') return {}
  const typed = formFields(await request.clone().formData())
  delete typed.password
  return typed
}

/** A path of our own to go to after signing in; anything else is `null`. */
export function safeNext(next: string | null): string | null {
  return next && /^\/(?![/\\])[^\s]*$/.test(next) && !next.startsWith('/sign-') ? next : null
}

/** A file's text, or what was pasted where no file was chosen. */
export async function fileOrText(form: FormData, name: string): Promise<string> {
  const file = form.get(`${name}-file`)
  if (file instanceof File && file.size > 0) return file.text()
  const pasted = form.get(name)
  return typeof pasted === 'string' ? pasted : ''
}

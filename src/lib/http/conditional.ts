/** Whether a program already has what it asks for (RFC 9110, 13.1): its entity tag counts, and its date only without one. */
export interface Validators {
  readonly etag: string
  /** A whole second. */
  readonly lastModifiedMs: number
}

export function isUnchanged(headers: Headers, { etag, lastModifiedMs }: Validators): boolean {
  const tags = headers.get('if-none-match')
  // A proxy that compresses makes a tag weak; If-None-Match compares weakly (13.1.2).
  if (tags !== null) return tags.trim() === '*' || tags.split(',').some((tag) => tag.trim().replace(/^W\//, '') === etag)
  const since = Date.parse(headers.get('if-modified-since') ?? '')
  return !Number.isNaN(since) && lastModifiedMs <= since
}

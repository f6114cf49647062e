/** What the post room's page shows: the newest letters and one of them opened. */
import type { Config } from '#lib/config.server.ts'
import { notFound } from '#lib/http/app-error.ts'
import { listPosted, type PostedLetter, readPosted } from '#lib/mail/post-room.server.ts'

const MOST_LETTERS = 100

export interface PostRoomPage {
  readonly letters: readonly PostedLetter[]
  readonly opened: PostedLetter | null
}

export async function loadPostRoom(config: Config, name: string | null): Promise<PostRoomPage> {
  const opened = name === null ? null : await readPosted(config, name)
  if (name !== null && !opened) throw notFound('letter')
  const letters: PostedLetter[] = []
  for (const posted of await listPosted(config, MOST_LETTERS)) {
    const letter = await readPosted(config, posted)
    if (letter) letters.push(letter)
  }
  return { letters, opened }
}

/** The page's side of the worker: starts it when it is first needed, and lets only the newest answer of a kind through. */
import { useEffect, useMemo, useRef } from 'react'
import type { Answered, Asked } from '#lib/plan/worker-messages.ts'

type Ticketed = 'lay' | 'try' | 'water'
type Open<Message> = Message extends { readonly ticket: number } ? Omit<Message, 'ticket'> : Message

export interface Planner {
  readonly ask: (message: Open<Asked>) => void
  /** Ends what is being planned; the next question starts anew. */
  readonly stop: () => void
}

const KIND_OF: Readonly<Record<string, Ticketed>> = { figures: 'lay', effect: 'try', verdict: 'water' }

export function usePlanner(onAnswer: (answer: Answered) => void, onFailure: (message: string) => void): Planner {
  const worker = useRef<Worker | null>(null)
  const newest = useRef<Record<Ticketed, number>>({ lay: 0, try: 0, water: 0 })
  const heard = useRef({ onAnswer, onFailure })
  heard.current = { onAnswer, onFailure }
  useEffect(() => () => worker.current?.terminate(), [])
  return useMemo(() => {
    const start = (): Worker => {
      const made = new Worker(new URL('./plan-worker.ts', import.meta.url), { type: 'module' })
      made.addEventListener('message', ({ data }: MessageEvent<Answered>) => {
        const kind = KIND_OF[data.kind]
        if (kind && 'ticket' in data && data.ticket !== newest.current[kind]) return
        heard.current.onAnswer(data)
      })
      made.addEventListener('error', () => {
        made.terminate()
        worker.current = null
        heard.current.onFailure('The planner stopped for a reason that nobody expected. Ask again.')
      })
      return made
    }
    return {
      ask: (message) => {
        worker.current ??= start()
        const ticket = message.kind === 'plan' ? 0 : ++newest.current[message.kind]
        worker.current.postMessage({ ...message, ticket })
      },
      stop: () => {
        worker.current?.terminate()
        worker.current = null
      },
    }
  }, [])
}

import { joined } from './curves'
import {
  askLowest,
  askSweep,
  type LowestQuestion,
  type LowestRate,
  type RateCurve,
  type SweepQuestion,
} from './questions'

/*
 * Answers questions piece by piece, so that a newer question of the same kind, which comes in as a message, ends an older one at once.
 */

/** Resolves to null when a newer question of that kind came in meanwhile. */
export interface RatesService {
  sweep(ticket: number, question: SweepQuestion): Promise<readonly RateCurve[] | null>
  /** As `sweep`, for the few rates that a table shows; it doesn't wait for a long sweep to end. */
  spot(ticket: number, question: SweepQuestion): Promise<readonly RateCurve[] | null>
  lowest(ticket: number, question: LowestQuestion): Promise<readonly LowestRate[] | null>
}

const PIECE_RATES = 8

export function ratesService(): RatesService {
  const latest = { sweep: 0, spot: 0, lowest: 0 }

  async function sweepInPieces(kind: 'sweep' | 'spot', ticket: number, question: SweepQuestion) {
    latest[kind] = Math.max(latest[kind], ticket)
    const pieces: (readonly RateCurve[])[] = []
    for (let from = 0; from < question.ratesHz.length; from += PIECE_RATES) {
      await messagesIn()
      if (latest[kind] !== ticket) return null
      pieces.push(askSweep({ ...question, ratesHz: question.ratesHz.slice(from, from + PIECE_RATES) }))
    }
    return joined(pieces)
  }

  return {
    sweep: (ticket, question) => sweepInPieces('sweep', ticket, question),
    spot: (ticket, question) => sweepInPieces('spot', ticket, question),
    async lowest(ticket, question) {
      latest.lowest = Math.max(latest.lowest, ticket)
      const answers: LowestRate[] = []
      for (const how of question.methods) {
        await messagesIn()
        if (latest.lowest !== ticket) return null
        answers.push(askLowest(question, how))
      }
      return answers
    },
  }
}

/** A timer, not a settled promise: only between tasks do waiting messages come in. */
const messagesIn = () => new Promise<void>((resolve) => setTimeout(resolve, 0))

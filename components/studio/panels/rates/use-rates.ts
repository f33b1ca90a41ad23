'use client'

import { useEffect, useRef, useState } from 'react'
import { ratesClient, type RatesClient } from './rates-client'

/** The worker behind the panel, for as long as the panel is open. */
export function useRatesClient(): RatesClient {
  const [client] = useState(ratesClient)
  useEffect(() => () => client.end(), [client])
  return client
}

interface Answered<Question, Answer> {
  readonly question: Question
  readonly answer: Answer
}

/**
 * The answer to the latest question that was answered, with that question; it is stale while `answered.question !== question`. The
 * question must keep its identity for as long as it is the same.
 */
export function useAnswer<Question, Answer>(
  question: Question,
  ask: (ticket: number, question: Question) => Promise<Answer | null>,
): { readonly answered: Answered<Question, Answer> | null; readonly failed: boolean } {
  const [answered, setAnswered] = useState<Answered<Question, Answer> | null>(null)
  const [failedQuestion, setFailedQuestion] = useState<Question | null>(null)
  const ticket = useRef(0)
  useEffect(() => {
    ticket.current += 1
    let isWanted = true
    ask(ticket.current, question).then(
      (answer) => {
        if (isWanted && answer !== null) setAnswered({ question, answer })
      },
      () => {
        // The worker can only fail whole; the panel says so in place of the answer.
        if (isWanted) setFailedQuestion(() => question)
      },
    )
    return () => {
      isWanted = false
    }
  }, [ask, question])
  return { answered, failed: failedQuestion === question }
}

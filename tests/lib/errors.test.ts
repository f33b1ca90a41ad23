import { describe, expect, it } from 'vitest'
import { designFromSpec, DesignError } from '@/dsp'
import { defaultSpec } from '@/lib/designs/edits'
import { AppError, asAppError, brokeConstraint, problemOf, problemResponse } from '@/lib/errors'

/** As drizzle wraps what the driver threw. */
const wrapped = (cause: unknown) => new Error('Failed query: select 1', { cause })
const withCode = (code: string, more: object = {}) => Object.assign(new Error('inside'), { code, ...more })

describe('what was thrown, as it is told outside', () => {
  it('keeps a refusal by the numbers: its code, field and nearest value', () => {
    const impossible = { ...defaultSpec, analog: { ...defaultSpec.analog, edgesHz: [900] } }
    let thrown: unknown
    try {
      designFromSpec(impossible)
    } catch (error) {
      thrown = error
    }
    if (!(thrown instanceof DesignError)) throw new Error('not refused')
    const error = asAppError(thrown)
    expect(error.status).toBe(422)
    expect(problemOf(error)).toEqual({
      code: thrown.code,
      message: thrown.message,
      field: 'analog.edgesHz.0',
      nearest: thrown.nearest,
    })
  })

  it.each(['ECONNREFUSED', 'ECONNRESET', '57P01', '57P03', '08006', '53300'])(
    'knows a database that is away by %s',
    (code) => {
      expect(asAppError(wrapped(withCode(code)))).toMatchObject({ code: 'database-away', status: 503 })
    },
  )

  it('knows it by the pool’s vain wait', () => {
    expect(asAppError(new Error('timeout exceeded when trying to connect')).code).toBe('database-away')
  })

  it.each([
    ['a broken constraint', wrapped(withCode('23505'))],
    ['a bug', new TypeError('x is undefined')],
    ['no error at all', 'a string'],
  ])('tells nothing of %s', async (_, thrown) => {
    const response = problemResponse(asAppError(thrown))
    expect(response.status).toBe(500)
    const text = await response.text()
    expect(text).not.toMatch(/select|undefined|string|inside/)
  })

  it('is application/problem+json, with when to come back', async () => {
    const response = problemResponse(new AppError('too-many', 'Too many.', { retryAfterSeconds: 42, field: 'email' }))
    expect(response.status).toBe(429)
    expect(response.headers.get('content-type')).toBe('application/problem+json')
    expect(response.headers.get('retry-after')).toBe('42')
    expect(await response.json()).toMatchObject({
      status: 429,
      title: 'too-many',
      detail: 'Too many.',
      code: 'too-many',
      field: 'email',
    })
  })
})

describe('a constraint that stopped a write', () => {
  it('is known by its name, however deep', () => {
    const error = wrapped(wrapped(withCode('23503', { constraint: 'drafts_parent_fk' })))
    expect(brokeConstraint(error, 'drafts_parent_fk')).toBe(true)
    expect(brokeConstraint(error, 'another')).toBe(false)
  })
})

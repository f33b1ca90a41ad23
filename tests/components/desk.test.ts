import { describe, expect, it } from 'vitest'
import { freshest, remember } from '@/components/drafting/desk'
import { defaultSpec } from '@/lib/designs/edits'

const draft = (revision: number) => ({
  spec: defaultSpec,
  parentNumber: null,
  revision,
  updatedAt: '2026-12-01T09:00:00Z',
})

describe('what a tab remembers', () => {
  it('wins over an older page, and loses to a newer one', () => {
    remember('me', 'design', { draft: draft(5), versions: [] })
    expect(freshest('me', 'design', { draft: draft(2), versions: [] }).draft?.revision).toBe(5)
    expect(freshest('me', 'design', { draft: draft(9), versions: [] }).draft?.revision).toBe(9)
  })
  it('is one person’s own', () => {
    remember('me', 'other design', { draft: draft(5), versions: [] })
    expect(freshest('you', 'other design', { draft: null, versions: [] }).draft).toBeNull()
  })
})

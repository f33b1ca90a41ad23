import { describe, expect, it, vi } from 'vitest'
import { designFromSpec } from '@/dsp'
import { checksumOf, coefficientsOf } from '@/lib/designs/coefficients'
import { defaultSpec } from '@/lib/designs/edits'
import { knownDifference } from '@/lib/designs/known-difference'
import * as recompute from '@/lib/designs/recompute'

const design = designFromSpec(defaultSpec)
const version = {
  number: 1,
  spec: defaultSpec,
  coefficients: coefficientsOf(design),
  checksum: checksumOf(design),
  engineVersion: '0.9.0',
}

describe('recomputing what is opened', () => {
  it('is done once for the same coefficients, and answers the same', () => {
    const asked = vi.spyOn(recompute, 'recomputeDifference')
    expect(knownDifference(version)).toBeNull()
    expect(knownDifference({ ...version })).toBeNull()
    expect(asked).toHaveBeenCalledTimes(1)
    const altered = { ...version, coefficients: { ...version.coefficients, sampleRateHz: 1 }, checksum: 'b'.repeat(64) }
    expect(knownDifference(altered)).toMatchObject({ storedEngine: '0.9.0' })
    expect(knownDifference(altered)).toEqual(knownDifference(altered))
    expect(asked).toHaveBeenCalledTimes(2)
  })

  it('forgets the oldest first, so that it never grows without bound', () => {
    const asked = vi.spyOn(recompute, 'recomputeDifference').mockReturnValue(null)
    for (let number = 1; number <= 400; number += 1) knownDifference({ ...version, checksum: `c${number}` })
    asked.mockClear()
    knownDifference({ ...version, checksum: 'c400' })
    expect(asked).not.toHaveBeenCalled()
    knownDifference({ ...version, checksum: 'c1' })
    expect(asked).toHaveBeenCalledTimes(1)
    asked.mockRestore()
  })
})

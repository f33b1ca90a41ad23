import { describe, expect, it } from 'vitest'
import type { FamilyDesign } from '@/dsp'
import { defaultSpec, withFamily, withHold, withMethod, withResponse } from '@/lib/designs/edits'
import { statementText } from '@/lib/designs/statement'

const plain = (spec: FamilyDesign) => statementText(spec).replaceAll('\u2009', ' ')

describe('the sentence that is the design', () => {
  it('names family, order, edge, rate, method and the frequency held', () => {
    expect(plain(withHold(defaultSpec, 120))).toBe(
      'A low-pass Butterworth of order 4, down 3 dB at 120 Hz, run at 1.2 kHz by the bilinear transform held at 120 Hz.',
    )
    expect(plain(withHold(defaultSpec, 'none'))).toContain('bilinear transform, not held')
  })
  it('fills in what a new family needs and lets go of what it has no use for', () => {
    const elliptic = withFamily(defaultSpec, 'elliptic')
    expect(plain(elliptic)).toContain('with 0.5 dB of ripple to 120 Hz and 60 dB down beyond')
    expect(withFamily(elliptic, 'butterworth').analog).not.toHaveProperty('rippleDb')
    expect(plain(withFamily(defaultSpec, 'bessel'))).toContain('Bessel–Thomson of order 4, down 3 dB at 120 Hz')
  })
  it('gives a band two edges and takes one back', () => {
    const band = withResponse(defaultSpec, 'bandpass')
    expect(band.analog.edgesHz).toEqual([30, 120])
    expect(plain(band)).toContain('held at both edges')
    expect(withResponse(band, 'lowpass').analog.edgesHz).toEqual([120])
  })
  it('drops the options of a method that is left', () => {
    const restored: FamilyDesign = { ...defaultSpec, how: { method: 'impulse-invariant', restoreGain: true } }
    expect(plain(restored)).toContain('impulse-invariant method, gain restored')
    expect(withMethod(restored, 'matched-z')).toMatchObject({ how: { method: 'matched-z' } })
  })
})

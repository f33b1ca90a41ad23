import { renderToStaticMarkup } from 'react-dom/server'
import { describe, expect, it } from 'vitest'
import { Planes } from '@/components/studio/planes/planes'
import { ResponseStack } from '@/components/studio/stack/response-stack'
import type { StackProps } from '@/components/studio/stack/props'
import { isFir, type FamilyDesign } from '@/dsp'
import { ellipticSpec, plainSpec, stackOf } from './stack-fixture'

const nothing = () => undefined

function markup(spec: FamilyDesign, change: Partial<StackProps> = {}): string {
  const { traces, trusted, view } = stackOf(spec, { crosshairHz: 200 })
  return renderToStaticMarkup(
    <ResponseStack
      spec={spec}
      traces={traces}
      trusted={trusted}
      view={view}
      onView={nothing}
      onResetView={nothing}
      edit={{ begin: nothing, change: nothing, commit: nothing, cancel: nothing }}
      refusal={null}
      {...change}
    />,
  )
}

/** Opening tags with that role. */
const withRole = (html: string, role: string): string[] =>
  html.match(new RegExp(`<[^>]*role="${role}"[^>]*>`, 'g')) ?? []

describe('the stack for those who can’t see it', () => {
  it('offers every handle as a slider with name, bounds, value and unit', () => {
    const sliders = withRole(markup(ellipticSpec), 'slider')
    expect(sliders).toHaveLength(1 + 7)
    for (const slider of sliders) {
      for (const attribute of [
        'aria-label',
        'aria-valuemin',
        'aria-valuemax',
        'aria-valuenow',
        'aria-valuetext',
        'tabindex="0"',
      ]) {
        expect(slider).toContain(attribute)
      }
    }
  })

  it('has a polite live region, a table, and buttons that say whether they hold', () => {
    const html = markup(plainSpec)
    expect(html).toContain('aria-live="polite"')
    expect(html).toContain('table of values')
    for (const name of ['analog', 'bilinear', 'impulse-invariant', 'matched-z', 'step-invariant']) {
      expect(html).toMatch(new RegExp(`aria-pressed="true"[^>]*title="Hide ${name}`))
    }
  })

  it('lets a reader look but not edit', () => {
    expect(withRole(markup(ellipticSpec, { readOnly: true }), 'slider')).toHaveLength(1)
  })

  it('sets a refusal beside its handle and marks it', () => {
    const html = markup(plainSpec, {
      refusal: { field: 'analog.edgesHz.0', message: '0 < corner < 300 Hz (half the rate)' },
    })
    expect(html).toMatch(/data-handle="edge-0"/)
    expect(html).toContain('0 &lt; corner &lt; 300 Hz (half the rate)')
    const refused = withRole(html, 'slider').filter((slider) => slider.includes('aria-invalid="true"'))
    expect(refused).toHaveLength(1)
    expect(refused[0]).toContain('aria-describedby')
  })
})

describe('the planes', () => {
  it('describe themselves and number what coincides', () => {
    const { versions } = stackOf(plainSpec)
    const html = renderToStaticMarkup(
      <Planes
        analog={versions.analog}
        versions={versions.digital.flatMap(({ id, filter }) =>
          isFir(filter) ? [] : [{ id, zeros: filter.zeros, poles: filter.poles }],
        )}
      />,
    )
    expect(html).toContain('s-plane: 4 poles, 0 zeros and 4 zeros at infinity')
    expect(html).toMatch(/z-plane with the unit circle: bilinear 4 poles/)
    // Four zeros of the bilinear version at z = −1 are one mark with a 4.
    expect(html).toMatch(/<text[^>]*>4<\/text>/)
    expect(html).not.toMatch(/NaN|Infinity/)
  })
})

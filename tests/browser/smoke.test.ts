import { describe, expect, it } from 'vitest'
import { at, expectAccessible, expectFits, picture, withPage, type Scheme } from './browser'

describe('the running product', () => {
  it('answers that it is ready, and lets nobody keep that answer', async () => {
    const answer = await fetch(at('/api/health'))
    expect(answer.status).toBe(200)
    expect(answer.headers.get('cache-control')).toBe('no-store')
    expect(await answer.json()).toMatchObject({ status: 'ready' })
  })

  it('does not say what it is made with', async () => {
    const answer = await fetch(at('/'), { redirect: 'manual' })
    expect(answer.headers.get('x-powered-by')).toBeNull()
  })

  for (const width of [1440, 390] as const) {
    for (const scheme of ['light', 'dark'] as const satisfies readonly Scheme[]) {
      it(`opens its first page at ${width} in ${scheme}, alive and without a fault`, async () => {
        await withPage({ width, scheme }, async ({ page }) => {
          await page.goto('/')
          await page.getByRole('heading', { level: 1 }).first().waitFor()
          // A page whose scripts a content policy refused looks the same and does nothing: React marks what it has taken charge of.
          await page.waitForFunction(() =>
            Object.keys(document.body).some(
              (key) => key.startsWith('__reactFiber$') || key.startsWith('__reactProps$'),
            ),
          )
          await picture(page, `first-page-${width}-${scheme}`)
          await expectFits(page)
          await expectAccessible(page)
        })
      })
    }
  }
})

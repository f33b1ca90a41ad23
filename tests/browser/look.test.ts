import { describe, it } from 'vitest'
import { signedIn } from './accounts'
import { expectAccessible, expectFits, picture, withPage, type Scheme } from './browser'
import { openDesign } from './studio'

/*
 * Every screen at both widths and in both schemes: nothing sticks out, axe finds nothing, the page has no fault of its own. The pictures
 * are for people to look at.
 */

const drawers = ['Rates', 'Time response', 'Sections', 'Signal trial', 'History'] as const

for (const width of [1440, 390] as const) {
  for (const scheme of ['light', 'dark'] as const satisfies readonly Scheme[]) {
    describe(`at ${width} in ${scheme}`, () => {
      it('the studio and each drawer', async () => {
        await withPage({ width, scheme, state: await signedIn('designer') }, async ({ page }) => {
          await openDesign(page, /Deck accelerometer/)
          for (const drawer of drawers) {
            await page.getByRole('tab', { name: drawer }).click()
            await page.getByText('Opening…').waitFor({ state: 'detached' })
            await page.waitForTimeout(500)
            await picture(page, `studio-${drawer.toLowerCase().replace(' ', '-')}-${width}-${scheme}`)
            await expectFits(page)
            await expectAccessible(page)
          }
        })
      })

      it('projects, team, account, a version and a comparison', async () => {
        await withPage({ width, scheme, state: await signedIn('owner') }, async ({ page }) => {
          for (const [name, path] of [
            ['projects', '/projects'],
            ['new-project', '/projects/new'],
            ['team', '/team'],
            ['account', '/account'],
          ] as const) {
            await page.goto(path)
            await picture(page, `${name}-${width}-${scheme}`)
            await expectFits(page)
            await expectAccessible(page)
          }
          await page.goto('/projects')
          const href = await page
            .getByRole('link', { name: /Deck accelerometer/ })
            .first()
            .getAttribute('href')
          for (const [name, path] of [
            ['version', `${href}/versions/2`],
            ['compare', `${href}/compare?a=1&b=3`],
          ] as const) {
            await page.goto(path)
            await page.getByRole('heading').first().waitFor()
            await page.waitForTimeout(500)
            await picture(page, `${name}-${width}-${scheme}`)
            await expectFits(page)
            await expectAccessible(page)
          }
        })
      })

      it('signing in and up', async () => {
        await withPage({ width, scheme }, async ({ page }) => {
          for (const path of ['/sign-in', '/sign-up', '/forgot']) {
            await page.goto(path)
            await picture(page, `${path.slice(1)}-${width}-${scheme}`)
            await expectFits(page)
            await expectAccessible(page)
          }
        })
      })
    })
  }
}

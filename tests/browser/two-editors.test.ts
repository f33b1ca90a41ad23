import { describe, expect, it } from 'vitest'
import { signedIn } from './accounts'
import { openPage, picture, withPage } from './browser'
import { draftSaved, newDesign, statement, studioReady, word } from './studio'

describe('two people on one design', () => {
  it('shows the second both versions and lets them choose; nothing is lost', async () => {
    const other = await openPage({ state: await signedIn('owner') })
    try {
      await withPage({ state: await signedIn('designer') }, async ({ page }) => {
        await newDesign(page, 'Deck edge, shared sheet')
        const address = new URL(page.url()).pathname
        await other.page.goto(address)
        await studioReady(other.page)

        // The first saves order 5.
        await word(other.page, 'Order').fill('5')
        await word(other.page, 'Order').press('Enter')
        await other.page.getByRole('button', { name: /^Save version/ }).click()
        await other.page.getByLabel(/What changed/).fill('Steeper')
        await other.page.keyboard.press('Enter')
        await other.page.getByRole('button', { name: /saved$/ }).waitFor()

        // The second, who began on the same version, saves order 6.
        await word(page, 'Order').fill('6')
        await word(page, 'Order').press('Enter')
        await page.getByRole('button', { name: /^Save version/ }).click()
        await page.getByLabel(/What changed/).fill('Steeper still')
        await page.keyboard.press('Enter')
        await page.getByText(/was saved meanwhile/).waitFor()
        expect(await statement(page)).toContain('order 6')
        await picture(page, 'conflict-1440')
        await page.getByRole('button', { name: /^Save mine as version/ }).click()
        await page.getByRole('button', { name: /saved$/ }).waitFor()

        // Both stand in the history.
        await page.reload()
        await studioReady(page)
        await page.getByRole('tab', { name: 'History' }).click()
        await page
          .getByText(/1 · Steeper$/)
          .first()
          .waitFor()
        await page
          .getByText(/2 · Steeper still/)
          .first()
          .waitFor()
      })
    } finally {
      await other.close()
    }
  })

  it('tells of a draft that the same person changed in another window', async () => {
    const state = await signedIn('designer')
    const second = await openPage({ state })
    try {
      await withPage({ state }, async ({ page, problems }) => {
        await newDesign(page, 'Deck middle, two windows')
        await second.page.goto(new URL(page.url()).pathname)
        await studioReady(second.page)
        const saved = draftSaved(second.page, '"order":7')
        await word(second.page, 'Order').fill('7')
        await word(second.page, 'Order').press('Enter')
        await saved

        await word(page, 'Order').fill('8')
        await word(page, 'Order').press('Enter')
        await page.getByText(/changed in another window/).waitFor()
        expect(await statement(page)).toContain('order 8')
        await page.getByRole('button', { name: 'Take that one' }).click()
        await expect.poll(() => statement(page)).toContain('order 7')
        // The browser itself notes the 409 that told of it; that is no fault of the page.
        ;(problems as string[]).splice(0, problems.length, ...problems.filter((problem) => !problem.includes('409')))
      })
    } finally {
      await second.close()
    }
  })
})

describe('a server that can’t be reached', () => {
  it('keeps the draft in this browser and brings it back', async () => {
    await withPage({ state: await signedIn('designer') }, async ({ page, context, problems }) => {
      await newDesign(page, 'Pier head, on a bad line')
      // The drawer's worker has come before the line goes.
      await page
        .getByRole('button', { name: /^Run at/ })
        .first()
        .waitFor()
      await context.setOffline(true)
      await word(page, 'Order').fill('9')
      await word(page, 'Order').press('Enter')
      await page.getByText(/kept in this browser only/).waitFor()
      // The tab is closed before the line comes back.
      const address = new URL(page.url()).pathname
      await page.route('**/draft', (route) => route.abort())
      await context.setOffline(false)
      await page.goto(address)
      await studioReady(page)
      await page.unroute('**/draft')
      await page.getByRole('button', { name: 'Bring it back' }).click()
      await expect.poll(() => statement(page)).toContain('order 9')
      ;(problems as string[]).splice(
        0,
        problems.length,
        ...problems.filter((problem) => !/ERR_INTERNET_DISCONNECTED|ERR_FAILED|409/.test(problem)),
      )
    })
  })
})

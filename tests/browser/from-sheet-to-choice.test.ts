import type { Page } from 'playwright-core'
import { describe, expect, it } from 'vitest'
import { signedIn } from './accounts'
import { expectAccessible, expectFits, picture, withPage } from './browser'
import { newDesign, openDesign, statement, word } from './studio'

/* From what must be kept and lost to a filter: candidates, FIR filters, the fitted version, and an original of the user's own. */

const soon = <Value>(ask: () => Value) => expect.poll(ask, { timeout: 15_000 })
const tab = (page: Page, name: string) => page.getByRole('tab', { name, exact: true })
const plain = (text: string | null) => (text ?? '').replace(/[\u2009\u00a0]/g, ' ')
const drawer = (page: Page) => page.getByRole('region', { name: 'Drawer' })

/** Picks a word of the statement by the keyboard, as from a menu. */
async function pick(page: Page, name: RegExp, option: string): Promise<void> {
  await page.getByRole('button', { name }).first().focus()
  await page.keyboard.press('Enter')
  await page.getByRole('menuitemradio', { name: option, exact: true }).click()
}

const rows = (page: Page) => page.getByRole('region', { name: 'Candidates that meet the sheet' }).locator('tbody tr')

for (const [width, scheme] of [
  [1440, 'light'],
  [390, 'dark'],
] as const) {
  describe(`candidates at ${width} in ${scheme}`, () => {
    it('are found from the sheet, ranked, filtered, held up and taken', async () => {
      await withPage({ width, scheme, state: await signedIn('designer') }, async ({ page }) => {
        await openDesign(page, /Deck accelerometer/)
        await tab(page, 'Candidates').click()
        await page.getByRole('button', { name: 'Search for candidates' }).click()
        await drawer(page)
          .getByText(/\d+ found, \d+ can’t meet it; /)
          .waitFor({ timeout: 60_000 })
        const found = await rows(page).count()
        expect(found).toBeGreaterThan(5)
        await expectAccessible(page)
        await expectFits(page)
        await picture(page, `candidates-${width}-${scheme}`)

        // Ranked by a column, either way round.
        const multiplies = async () =>
          (await rows(page).locator('td:nth-of-type(7)').allInnerTexts()).map((text) => Number(plain(text)))
        const rising = await multiplies()
        expect(rising).toEqual([...rising].sort((one, other) => one - other))
        await page.getByRole('button', { name: 'multiplies' }).press('Enter')
        await soon(multiplies).toEqual([...rising].reverse())
        await page.getByRole('button', { name: 'multiplies' }).press('Enter')

        // Filtered by kind.
        await page.getByRole('radio', { name: 'FIR', exact: true }).check({ force: true })
        const taps = await rows(page).locator('th').allInnerTexts()
        expect(taps.length).toBeGreaterThan(0)
        for (const text of taps) expect(text).toMatch(/FIR \d+ taps/)
        await page.getByRole('radio', { name: 'all', exact: true }).check({ force: true })

        // What can't meet it is listed with the line that stops it.
        const why = page.getByText(/can’t meet it, and why/)
        await why.click()
        await drawer(page)
          .getByText(/misses line \d/)
          .first()
          .waitFor()

        // One held up joins the plots; let go, it leaves them.
        const hold = rows(page)
          .first()
          .getByRole('button', { name: /^Hold up / })
        const name = ((await hold.getAttribute('aria-label')) ?? '').replace('Hold up ', '')
        await hold.click()
        const traces = page.getByRole('group', { name: 'Traces' })
        await traces.getByRole('button', { name: new RegExp(name.split(',')[0] ?? '') }).waitFor()
        await rows(page)
          .first()
          .getByRole('button', { name: /^Let go of / })
          .click()

        // Taken, it is the statement, in one step of undo.
        const before = await statement(page)
        await rows(page)
          .first()
          .getByRole('button', { name: /^Put .* into the statement$/ })
          .click()
        await soon(() => statement(page)).not.toBe(before)
        await page.getByRole('button', { name: 'Undo' }).click()
        await soon(() => statement(page)).toBe(before)
      })
    })
  })
}

describe('candidates', () => {
  it('can be stopped, and say so', async () => {
    await withPage({ state: await signedIn('designer') }, async ({ page }) => {
      await openDesign(page, /Deck accelerometer/)
      await tab(page, 'Candidates').click()
      await page.getByRole('button', { name: 'Search for candidates' }).click()
      await page.getByRole('button', { name: 'Stop the search' }).click()
      await drawer(page)
        .getByText(/^Stopped: /)
        .waitFor()
    })
  })
})

describe('an FIR filter', () => {
  it('is stated, edited and seen like any other', async () => {
    await withPage({ state: await signedIn('designer') }, async ({ page }) => {
      await newDesign(page, 'Taps instead of poles')
      await pick(page, /^Family/, 'Kaiser-windowed FIR')
      await soon(() => statement(page)).toContain('Kaiser-windowed FIR of 63 taps, passing to 120 Hz')
      await word(page, 'Number of taps').fill('91')
      await word(page, 'Number of taps').press('Enter')
      await soon(() => statement(page)).toContain('of 91 taps')
      // An impossible edge is refused beside its word with one that works.
      await word(page, 'Band 2 begins at').fill('100')
      await word(page, 'Band 2 begins at').press('Enter')
      await page
        .getByText(/needs? some room|room between/)
        .first()
        .waitFor()
      await page.keyboard.press('Escape')
      await page.getByRole('slider', { name: 'Band 1, upper edge' }).press('ArrowRight')
      await soon(() => statement(page)).not.toContain('passing to 120 Hz')
      await tab(page, 'Sections').click()
      await page.getByRole('heading', { name: /91 taps/ }).waitFor()
      await expectAccessible(page)
      await picture(page, 'fir-1440-light')
      await pick(page, /^Kind of filter/, 'elliptic')
      await soon(() => statement(page)).toContain('elliptic')
    })
  })
})

describe('the fitted version', () => {
  it('stands beside the others, says what it is worth, and its mark can be moved', async () => {
    await withPage({ state: await signedIn('designer') }, async ({ page }) => {
      await newDesign(page, 'Fitted close')
      await page
        .getByText(/worst departures are: fitted .* the fitted version (is the closest|has no advantage)/)
        .first()
        .waitFor()
      await pick(page, /^Method/, 'fitted method')
      await soon(() => statement(page)).toContain('fitted method up to 180 Hz')
      await page.getByRole('slider', { name: 'Fitted up to' }).press('ArrowRight')
      await soon(() => statement(page)).toContain('fitted method up to 181 Hz')
    })
  })
})

describe('an original of the user’s own', () => {
  it('is given by roots or as measured, and the residual is shown; bad rows are named', async () => {
    await withPage({ state: await signedIn('designer') }, async ({ page }) => {
      await newDesign(page, 'As it was measured')
      await tab(page, 'Original').click()
      await page.getByLabel('Name', { exact: true }).fill('Mount by its poles')
      await page.getByRole('button', { name: 'Make it one at DC' }).click()
      await page.getByRole('button', { name: 'Use as the original' }).click()
      await soon(() => statement(page)).toContain('“Mount by its poles”, given by poles and zeros')
      await page.getByText(/^Residual from/).waitFor()

      await page.getByRole('radio', { name: 'A measured table' }).check({ force: true })
      await page
        .getByLabel('Rows', { exact: true })
        .fill('1; 0; -1\n10; zero; -5\n20; -1; -10\n15; -1; -9\n40; -2; -20')
      await page.getByRole('button', { name: 'Fit to this table' }).click()
      await page.getByText(/^Row 2/).waitFor()
      const table = Array.from({ length: 40 }, (_, k) => {
        const hertz = 2 * 1.1 ** k
        const ratio = hertz / 80
        return [hertz, -10 * Math.log10(1 + ratio ** 2), (-180 / Math.PI) * Math.atan(ratio)]
          .map((v) => v.toFixed(6))
          .join('; ')
      })
      await page.getByLabel('Rows', { exact: true }).fill(['frequency Hz; level dB; phase deg', ...table].join('\n'))
      await page.getByRole('button', { name: 'Fit to this table' }).click()
      await soon(() => statement(page)).toContain('given as measured')
      await page.getByText(/^Residual from 2\sHz/).waitFor()
      await expectAccessible(page)
      await expectFits(page)
      await picture(page, 'original-1440-light')
    })
  })
})

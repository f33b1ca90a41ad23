import { readFileSync } from 'node:fs'
import type { Page } from 'playwright-core'
import { describe, expect, it } from 'vitest'
import { signedIn } from './accounts'
import { expectAccessible, expectFits, picture, withPage } from './browser'
import { draftSaved } from './studio'

/** A demo chain by its title, from the list of projects as a person would. */
async function openChain(page: Page, title: RegExp): Promise<void> {
  await page.goto('/projects')
  await page.getByRole('link', { name: title }).first().click()
  await page.waitForURL(/\/chains\//)
  await trace(page).waitFor()
}

const trace = (page: Page) => page.getByRole('slider', { name: /^Output frequency traced/ })
const chart = (page: Page) => page.getByRole('region', { name: 'Fold chart' })
const openDrawer = (page: Page, name: string) => page.getByRole('tab', { name, exact: true }).click()
/** Back to the version that fails, whatever the draft was left as; a draft that equals it stays. */
async function bringBackFailing(page: Page): Promise<void> {
  await openDrawer(page, 'History')
  const failing = page
    .getByRole('list', { name: 'Versions, newest first' })
    .getByRole('listitem')
    .filter({ hasText: 'Half the taps in the second decimation' })
  await failing.waitFor()
  const back = failing.getByRole('button', { name: /^Bring back into the draft/ })
  if ((await back.count()) === 0) return
  const saved = draftSaved(page, '"taps":27')
  await back.click()
  await saved
}

/** How often the strips’ canvas was painted when it last was. */
const paints = (page: Page) => chart(page).locator('canvas').getAttribute('data-paints')

describe.each([
  { width: 1440, scheme: 'light' },
  { width: 390, scheme: 'dark' },
] as const)('a chain that fails where its fold chart shows it, at $width in $scheme', ({ width, scheme }) => {
  it('is seen, traced, mended by a plan, spread, proved and saved', async () => {
    await withPage({ width, scheme, state: await signedIn('designer') }, async ({ page }) => {
      await openChain(page, /^Pump casing, rate down by four and by two/)

      await bringBackFailing(page)

      // The fold chart says which strip is weak, and who folds it.
      const sentence = chart(page).getByText(/^The weak fold is the 2nd strip/)
      const weakBefore = (await sentence.textContent()) ?? ''
      const down = Number(/([\d.]+)\sdB down/.exec(weakBefore)?.[1])
      expect(down).toBeLessThan(75)
      expect(weakBefore).toContain('it folds at Down by 2')

      // What can't be is refused beside its word, within the page, and Escape takes it back.
      const keptTo = page.getByRole('spinbutton', { name: 'Kept to' })
      await keptTo.fill('999 kHz')
      await keptTo.press('Enter')
      await page.getByRole('button', { name: /^Use 1\.28/ }).waitFor()
      await expectFits(page)
      await keptTo.press('Escape')
      expect(await keptTo.inputValue()).toMatch(/^1\s?kHz$/)

      // Keys trace one output frequency to every input that lands on it, and repaint nothing.
      await trace(page).focus()
      const painted = await paints(page)
      await page.keyboard.press('Home')
      await page.keyboard.press('PageUp')
      await page.keyboard.press('ArrowRight')
      await chart(page)
        .getByText(/ also hears /)
        .waitFor()
      expect(await trace(page).getAttribute('aria-valuetext')).toMatch(
        /Hz and \d+ more; the loudest of them is .* (down|up)$/,
      )
      expect(await paints(page)).toBe(painted)
      await chart(page).getByText('Inputs that land on one frequency').click()
      const landing = chart(page).getByRole('region', { name: 'Inputs that land on the traced frequency' })
      expect(await landing.getByRole('row').count()).toBeGreaterThan(4)
      await trace(page).focus()
      await page.keyboard.press('Escape')
      await chart(page)
        .getByText(/^point at a strip/)
        .waitFor()
      expect(await trace(page).getAttribute('aria-valuetext')).toBe('not set')
      await chart(page).getByText('Strips as a table').click()
      await picture(page, `chain-failing-${width}-${scheme}`)
      await expectFits(page)
      await expectAccessible(page)

      const downloading = page.waitForEvent('download')
      await chart(page).getByRole('button', { name: 'Download the fold chart as SVG' }).click()
      const svg = readFileSync(await (await downloading).path(), 'utf8')
      expect(svg).toContain('the weak fold')

      // A plan that meets the sheet is taken: the weak fold is as far down as the sheet asks.
      await openDrawer(page, 'Trade-offs')
      await page.getByRole('button', { name: 'Find decimation plans' }).click()
      await page.getByText(/\d+ plans meet the sheet/).waitFor({ timeout: 60_000 })
      const plans = page.getByRole('region', { name: 'Decimation plans', exact: true })
      // Another at each width: a version that equals the newest one can't be saved.
      await plans
        .getByRole('button', { name: /^Take plan/ })
        .nth(width === 390 ? 1 : 0)
        .click()
      await page.getByText(/^Took plan/).waitFor()
      await page.getByText('All 4 met').waitFor()
      expect(Number(/([\d.]+)\sdB down/.exec((await sentenceOf(page)) ?? '')?.[1])).toBeGreaterThan(75)
      await plans.getByRole('row').filter({ hasText: 'as it is' }).waitFor()
      expect(await page.getByText(/has changed since this search/).count()).toBe(0)
      await expectFits(page)

      // Every panel of the drawer opens, fits and passes.
      for (const name of ['Response', 'Delay', 'Noise', 'Build sheet']) {
        await openDrawer(page, name)
        await page.getByText('Opening…').waitFor({ state: 'detached' })
        await expectFits(page)
        await expectAccessible(page)
        await picture(page, `chain-${name.toLowerCase().replace(' ', '-')}-${width}-${scheme}`)
      }

      // Channels spread by their parts.
      await openDrawer(page, 'Tolerance')
      await page.getByRole('button', { name: 'Run the channels' }).click()
      await page
        .getByRole('slider', { name: /^Crosshair on Phase between channels, 2000 channels at 2.% parts/ })
        .waitFor({
          timeout: 60_000,
        })
      await page.getByText('Percentiles as a table').click()
      await expectFits(page)
      await expectAccessible(page)
      await picture(page, `chain-tolerance-${width}-${scheme}`)
      const table = page.waitForEvent('download')
      await page.getByRole('button', { name: 'Download as CSV' }).click()
      expect(readFileSync(await (await table).path(), 'utf8')).toMatch(/^sensor,accelerometer\r\nchannels,2000\r\n/)

      // The chain is run, and what comes out agrees with what is computed.
      await openDrawer(page, 'Proof')
      await page.getByRole('button', { name: 'Run the proof' }).click()
      await page.getByText(/lines agree/).waitFor({ timeout: 100_000 })
      await expectFits(page)
      await expectAccessible(page)
      await picture(page, `chain-proof-${width}-${scheme}`)

      // A version, on purpose, with a note; the history has it and compares it.
      await page
        .getByRole('button', { name: /^Save version \d+$/ })
        .first()
        .click()
      const saving = page.getByRole('region', { name: 'Save a version' })
      await saving.getByRole('textbox').fill(`Few multiplies, and the sheet is met, ${width}`)
      await saving.getByRole('button', { name: /^Save version \d+$/ }).click()
      await page.getByRole('button', { name: /^Version \d+ saved$/ }).waitFor({ timeout: 60_000 })
      await openDrawer(page, 'History')
      const newest = page.getByRole('list', { name: 'Versions, newest first' }).getByRole('listitem').first()
      expect(await newest.textContent()).toContain(`Few multiplies, and the sheet is met, ${width}`)
      await newest.getByText('The draft equals it').waitFor()
      await expectAccessible(page)
      // As it was, so that whoever comes next finds a chain that fails.
      await bringBackFailing(page)
      await expect.poll(() => sentenceOf(page)).toBe(weakBefore)
    })
  }, 300_000)
})

const sentenceOf = (page: Page) =>
  chart(page)
    .getByText(/^The weak fold is/)
    .textContent()

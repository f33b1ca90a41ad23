import type { Page } from 'playwright-core'
import { describe, expect, it } from 'vitest'
import { signedIn } from './accounts'
import { expectAccessible, expectFits, picture, withPage } from './browser'
import { draftSaved, newDesign, studioReady } from './studio'

const sheetOf = (page: Page) => page.getByRole('region', { name: 'Requirement sheet' })
const number = (page: Page, name: string) => sheetOf(page).getByRole('textbox', { name, exact: true })
const lines = (page: Page) => sheetOf(page).locator('[data-line]')
const limit = (page: Page, name: string) => page.getByRole('slider', { name, exact: true })
const plain = (text: string | null) => (text ?? '').replace(/[\u2009\u00a0]/g, ' ')
const valueOf = async (page: Page, name: string) => plain(await number(page, name).inputValue())
const said = async (page: Page) => plain(await sheetOf(page).innerText())

/** What follows an edit is told a moment after it. */
const soon = <Value>(ask: () => Value) => expect.poll(ask, { timeout: 10_000 })

async function addLine(page: Page, kind: string): Promise<void> {
  await sheetOf(page).getByRole('button', { name: 'Add a line' }).click()
  await page.getByRole('menuitem', { name: kind, exact: true }).click()
}

for (const [width, scheme] of [
  [1440, 'light'],
  [1440, 'dark'],
  [390, 'light'],
  [390, 'dark'],
] as const) {
  describe(`the requirement sheet at ${width} in ${scheme}`, () => {
    it('is written, judged, dragged and started from a usual job, by mouse', async () => {
      await withPage({ width, scheme, state: await signedIn('designer') }, async ({ page }) => {
        await newDesign(page, `Requirements at ${width} in ${scheme}`)
        await sheetOf(page).getByText('Nothing is required of this design yet.').waitFor()
        await expectAccessible(page)

        // A new line suits the design, and has the focus.
        await addLine(page, 'Band to keep')
        await sheetOf(page)
          .getByText(/met by|missed by/)
          .first()
          .waitFor()
        expect(await valueOf(page, 'Line 1, to')).toBe('120 Hz')
        await soon(() => number(page, 'Line 1, from').evaluate((it) => it === document.activeElement)).toBe(true)
        await addLine(page, 'Band to lose')
        await addLine(page, 'Phase departure')
        await soon(() => lines(page).count()).toBe(3)
        await soon(() => said(page)).toMatch(/\d of 3 met; farthest past its limit: line \d, missed by/)

        // Quantities as people type them; what can't be is refused with the nearest that works.
        await number(page, 'Line 2, from').fill('0.3k')
        await number(page, 'Line 2, from').press('Enter')
        await soon(() => valueOf(page, 'Line 2, from')).toBe('300 Hz')
        await number(page, 'Line 1, to').fill('9k')
        await number(page, 'Line 1, to').press('Enter')
        await sheetOf(page).getByRole('button', { name: 'Use 600 Hz' }).click()
        await soon(() => valueOf(page, 'Line 1, to')).toBe('600 Hz')

        // Lines that can't both hold are named together.
        await sheetOf(page)
          .getByText(/Line 1 .* and line 2 .* both speak of/)
          .waitFor()
        await picture(page, `sheet-contradiction-${width}-${scheme}`)
        await page.getByRole('button', { name: 'Undo' }).click()
        await soon(() => valueOf(page, 'Line 1, to')).toBe('120 Hz')

        // The crosshair goes to where a line is worst.
        await sheetOf(page)
          .getByRole('button', { name: /^Line 2, worst at/ })
          .click()
        await soon(() => page.url()).toMatch(/[?&]at=300/)

        // An edge is pulled on the plot: the line follows, in one step of undo; Escape in mid-drag brings it back.
        const edge = limit(page, 'Requirement 2, lower edge')
        await edge.scrollIntoViewIfNeeded()
        const grip = await edge.boundingBox()
        if (!grip) throw new Error('The stop band has no edge to hold.')
        const [x, y] = [grip.x + grip.width / 2, grip.y + grip.height / 2]
        await page.mouse.move(x, y)
        await page.mouse.down()
        await page.mouse.move(x - 20, y, { steps: 5 })
        await soon(() => valueOf(page, 'Line 2, from')).not.toBe('300 Hz')
        await page.keyboard.press('Escape')
        await soon(() => valueOf(page, 'Line 2, from')).toBe('300 Hz')
        await page.mouse.up()
        await page.mouse.move(x, y)
        await page.mouse.down()
        await page.mouse.move(x - 20, y, { steps: 5 })
        await page.mouse.up()
        await soon(() => valueOf(page, 'Line 2, from')).not.toBe('300 Hz')
        await page.getByRole('button', { name: 'Undo' }).click()
        await soon(() => valueOf(page, 'Line 2, from')).toBe('300 Hz')

        await picture(page, `sheet-${width}-${scheme}`)
        await expectFits(page)
        await expectAccessible(page)

        // A usual job replaces the lines after saying how many go; undo brings them back.
        await sheetOf(page).getByRole('button', { name: 'Start from a usual job…' }).click()
        await sheetOf(page)
          .getByText(/^Source: /)
          .first()
          .waitFor()
        await sheetOf(page)
          .getByRole('button', { name: /^Start from Structural modes/ })
          .click()
        await sheetOf(page)
          .getByText(/3 lines go/)
          .waitFor()
        await picture(page, `sheet-start-from-${width}-${scheme}`)
        await expectFits(page)
        await expectAccessible(page)
        await sheetOf(page).getByRole('button', { name: 'Replace 3 lines' }).click()
        await soon(() => valueOf(page, 'Line 1, to')).toBe('50 Hz')
        await page.getByRole('button', { name: 'Undo' }).click()
        await soon(() => valueOf(page, 'Line 1, to')).toBe('120 Hz')

        // The sheet is part of the draft: a fresh page shows it.
        const saved = draftSaved(page, '"withinDb":0.25')
        await number(page, 'Line 1, within').fill('0.25')
        await number(page, 'Line 1, within').press('Enter')
        await saved
        await page.reload()
        await studioReady(page)
        await soon(() => valueOf(page, 'Line 1, within')).toBe('0.25 dB')
      })
    })
  })
}

describe('the requirement sheet by keyboard alone', () => {
  it('adds, steps, moves, removes and drags lines without a pointer', async () => {
    await withPage({ state: await signedIn('designer') }, async ({ page }) => {
      await newDesign(page, 'Requirements by keyboard')
      const add = async (downs: number) => {
        await sheetOf(page).getByRole('button', { name: 'Add a line' }).focus()
        await page.keyboard.press('Enter')
        await page.getByRole('menu').waitFor()
        for (let press = 0; press < downs; press += 1) await page.keyboard.press('ArrowDown')
        await page.keyboard.press('Enter')
      }
      await add(0)
      await number(page, 'Line 1, to').waitFor()
      await add(1)
      await number(page, 'Line 2, lost by').waitFor()

      // The focus stands in the new line; arrow keys step its number, the whole run one step of undo.
      await soon(() => number(page, 'Line 2, from').evaluate((it) => it === document.activeElement)).toBe(true)
      await number(page, 'Line 2, lost by').focus()
      for (let press = 0; press < 5; press += 1) await page.keyboard.press('ArrowUp')
      await soon(() => valueOf(page, 'Line 2, lost by')).toBe('40.5 dB')

      // Moved by the arrow keys on its own button, which keeps the focus.
      await sheetOf(page)
        .getByRole('button', { name: /^Move up line 2/ })
        .focus()
      await page.keyboard.press('ArrowUp')
      await soon(() => valueOf(page, 'Line 1, lost by')).toBe('40.5 dB')
      const held = () => page.evaluate(() => document.activeElement?.getAttribute('aria-label') ?? '')
      await soon(held).toMatch(/^Move up line 1/)
      await page.keyboard.press('ArrowDown')
      await soon(held).toMatch(/^Move down line 2/)

      // The edge on the plot is a slider that says what it does.
      const edge = limit(page, 'Requirement 1, upper edge')
      await edge.focus()
      expect(plain(await edge.getAttribute('aria-valuetext'))).toBe('requirement 1: keep up to 120 Hz')
      await page.keyboard.press('ArrowRight')
      await page.keyboard.press('ArrowRight')
      await page.keyboard.press('Enter')
      await soon(() => valueOf(page, 'Line 1, to')).toBe('122 Hz')
      await page.keyboard.press('ArrowRight')
      await page.keyboard.press('Escape')
      await soon(() => valueOf(page, 'Line 1, to')).toBe('122 Hz')

      // The last line removed hands the focus to the one before.
      await sheetOf(page)
        .getByRole('button', { name: /^Remove line 2/ })
        .focus()
      await page.keyboard.press('Enter')
      await soon(() => lines(page).count()).toBe(1)
      await soon(held).toMatch(/^Remove line 1/)
      await page.keyboard.press('Enter')
      await sheetOf(page).getByText('Nothing is required of this design yet.').waitFor()
      await soon(() => page.evaluate(() => document.activeElement?.textContent)).toBe('Add a line')
    })
  })
})

describe('the requirement sheet for those who may not edit', () => {
  it('is read, not edited', async () => {
    await withPage({ state: await signedIn('reviewer') }, async ({ page }) => {
      await page.goto('/projects')
      await page
        .getByRole('link', { name: /Deck accelerometer/ })
        .first()
        .click()
      await lines(page)
        .first()
        .getByText(/met|missed/)
        .waitFor()
      expect(await sheetOf(page).getByRole('textbox').count()).toBe(0)
      expect(
        await sheetOf(page)
          .getByRole('button', { name: /Add a line|Remove|Move/ })
          .count(),
      ).toBe(0)
      await expectAccessible(page)
    })
  })
})

import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { signedIn } from './accounts'
import { expectAccessible, expectFits, picture, withPage } from './browser'
import { foldLine, newDesign, statement, studioReady, word } from './studio'

describe.each([
  { width: 1440, scheme: 'light' },
  { width: 390, scheme: 'dark' },
] as const)('the main job, by mouse, at $width in $scheme', ({ width, scheme }) => {
  it('goes from a sentence to saved and exported coefficients', async () => {
    await withPage({ width, scheme, state: await signedIn('designer') }, async ({ page }) => {
      await newDesign(page, 'Hanger strain, logger low-pass')
      expect(await statement(page)).toContain('A low-pass Butterworth of order 4, down 3 dB at 120 Hz, run at 1.2 kHz')

      // A family is picked from its word, and brings what it needs.
      await page.getByRole('button', { name: /^Family/ }).click()
      await page.getByRole('menuitemradio', { name: 'Chebyshev I', exact: true }).click()
      expect(await statement(page)).toContain('with 0.5 dB of ripple to 120 Hz')

      // Quantities as people type them.
      await word(page, 'Edge').fill('0.2 Nyquist')
      await word(page, 'Edge').press('Enter')
      await expect.poll(() => statement(page)).toContain('to 120 Hz')
      await word(page, 'Sampling rate').fill('2.4k')
      await word(page, 'Sampling rate').press('Enter')
      await expect.poll(() => statement(page)).toContain('run at 2.4 kHz')

      // What can't be is refused beside the word, with the nearest value that works.
      await word(page, 'Sampling rate').fill('200')
      await word(page, 'Sampling rate').press('Enter')
      const refusal = page.getByRole('heading', { level: 1 }).getByRole('alert')
      await refusal.waitFor()
      expect(await refusal.textContent()).toMatch(/half the rate|corner|edge/i)
      expect(await statement(page)).toContain('200')
      await picture(page, `studio-refusal-${width}-${scheme}`, { fullPage: false })
      await refusal.getByRole('button', { name: /^Use/ }).click()
      await expect.poll(() => statement(page)).toMatch(/run at 24\d(\.\d+)? Hz/)
      await page.getByRole('button', { name: 'Undo' }).click()
      await expect.poll(() => statement(page)).toContain('run at 2.4 kHz')

      // The fold line is dragged: the rate follows, in one step of undo; Escape in mid-drag brings everything back.
      await foldLine(page).scrollIntoViewIfNeeded()
      const grip = await foldLine(page).boundingBox()
      if (!grip) throw new Error('The fold line has no handle.')
      const [x, y] = [grip.x + grip.width / 2, grip.y + grip.height / 2]
      await page.mouse.move(x, y)
      await page.mouse.down()
      await page.mouse.move(x - 60, y, { steps: 6 })
      await expect.poll(() => statement(page)).not.toContain('run at 2.4 kHz')
      await page.keyboard.press('Escape')
      await expect.poll(() => statement(page)).toContain('run at 2.4 kHz')
      await page.mouse.up()
      await page.mouse.move(x, y)
      await page.mouse.down()
      await page.mouse.move(x - 60, y, { steps: 6 })
      await page.mouse.up()
      const dragged = await statement(page)
      expect(dragged).not.toContain('run at 2.4 kHz')
      await page.getByRole('button', { name: 'Undo' }).click()
      await expect.poll(() => statement(page)).toContain('run at 2.4 kHz')
      const saved = page.waitForResponse((answer) => answer.url().endsWith('/draft') && answer.ok())
      await page.getByRole('button', { name: 'Redo' }).click()
      await expect.poll(() => statement(page)).toBe(dragged)

      // The draft saves itself: a fresh page shows it.
      await saved
      await page.getByText(/^Draft saved/).waitFor()
      await page.reload()
      await studioReady(page)
      expect(await statement(page)).toBe(dragged)

      // A version, on purpose, with a note.
      await page.getByRole('button', { name: /^Save version 1/ }).click()
      await page.getByLabel(/What changed in version 1/).fill('Ripple allowed, rate set by the fold line')
      await page.getByRole('region', { name: 'Save a version' }).getByRole('button', { name: 'Save version 1' }).click()
      await page.getByRole('button', { name: 'Version 1 saved' }).waitFor()

      // The history has it, compares it, and hands it over.
      await page.getByRole('tab', { name: 'History' }).click()
      await page
        .getByText(/Ripple allowed, rate set by the fold line/)
        .first()
        .waitFor()
      await picture(page, `studio-history-${width}-${scheme}`)
      await page.getByRole('link', { name: /^Hand over version/ }).click()
      await page.waitForURL(/\/versions\/1/)
      await picture(page, `hand-over-${width}-${scheme}`)
      await expectAccessible(page)
      await expectFits(page)
      const [download] = await Promise.all([
        page.waitForEvent('download'),
        page
          .getByRole('link', { name: /download/i })
          .or(page.getByRole('button', { name: /download/i }))
          .first()
          .click(),
      ])
      const file = readFileSync(await download.path(), 'utf8')
      expect(file).toMatch(/[0-9a-f]{64}/)
      expect(file).toContain('Chebyshev I')
    })
  })
})

describe.each([
  { width: 1440, scheme: 'dark' },
  { width: 390, scheme: 'light' },
] as const)('the main job, by keyboard alone, at $width in $scheme', ({ width, scheme }) => {
  it('states, drags, reads and saves without a pointer', async () => {
    await withPage({ width, scheme, state: await signedIn('designer') }, async ({ page }) => {
      await newDesign(page, 'Tower tilt, slow channel')
      const tabTo = async (reached: () => Promise<boolean>) => {
        for (let press = 0; press < 80; press += 1) {
          if (await reached()) return
          await page.keyboard.press('Tab')
        }
        throw new Error('The keyboard never got there.')
      }
      const focused = (name: RegExp) => () =>
        page.evaluate((source) => {
          const element = document.activeElement
          const label = element?.getAttribute('aria-label') ?? element?.textContent ?? ''
          return new RegExp(source, 'i').test(label)
        }, name.source)

      await tabTo(focused(/^Response/))
      await page.keyboard.press('Enter')
      await page.waitForFunction(() => document.activeElement?.getAttribute('role') === 'menuitemradio')
      await page.keyboard.press('ArrowDown')
      await page.keyboard.press('Enter')
      await expect.poll(() => statement(page)).toContain('A high-pass')
      await page.keyboard.press('Control+z')
      await expect.poll(() => statement(page)).toContain('A low-pass')

      await tabTo(focused(/^Order$/))
      await page.keyboard.press('ArrowUp')
      await expect.poll(() => statement(page)).toContain('order 5')
      await tabTo(focused(/^Edge$/))
      await page.keyboard.type('2.5')
      await page.keyboard.press('Enter')
      await expect.poll(() => statement(page)).toContain('down 3 dB at 2.5 Hz')
      // Escape gives back what was there.
      await page.keyboard.type('9999')
      await page.keyboard.press('Escape')
      expect(await statement(page)).toContain('down 3 dB at 2.5 Hz')

      // The plots: the crosshair and the fold line are sliders.
      await tabTo(focused(/^Crosshair/))
      await page.keyboard.press('ArrowRight')
      await tabTo(focused(/fold line/))
      const before = await statement(page)
      await page.keyboard.press('ArrowLeft')
      await page.keyboard.press('Enter')
      await expect.poll(() => statement(page)).not.toBe(before)

      // The drawer by arrows.
      await tabTo(focused(/^Rates$/))
      await page.keyboard.press('ArrowRight')
      await page.getByRole('tab', { name: 'Time response', selected: true }).waitFor()

      await page.keyboard.press('Control+s')
      await page.getByLabel(/What changed in version/).waitFor()
      await page.keyboard.type('Slower, steeper')
      await page.keyboard.press('Enter')
      await page.getByRole('button', { name: /^Version \d saved/ }).waitFor()
    })
  })
})

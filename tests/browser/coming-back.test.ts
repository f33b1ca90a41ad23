import { describe, expect, it } from 'vitest'
import { signedIn } from './accounts'
import { picture, withPage } from './browser'
import { draftSaved, newDesign, statement, studioReady, word } from './studio'

describe('coming back to a design', () => {
  it('finds the draft and the versions as they were left, by the browser’s Back', async () => {
    await withPage({ state: await signedIn('designer') }, async ({ page }) => {
      await newDesign(page, 'Bearing rail, left and found again')
      await word(page, 'Edge').fill('150')
      await word(page, 'Edge').press('Enter')
      await expect.poll(() => statement(page)).toContain('at 150 Hz')
      await page.getByRole('button', { name: /^Save version 1/ }).click()
      await page.getByLabel(/What changed/).fill('First')
      await page.keyboard.press('Enter')
      await page.getByRole('button', { name: 'Version 1 saved' }).waitFor()
      await word(page, 'Edge').fill('210')
      await word(page, 'Edge').press('Enter')
      await expect.poll(() => statement(page)).toContain('at 210 Hz')
      // Left at once, before the hand has rested.
      await page
        .getByRole('link', { name: /footbridge/i })
        .first()
        .click()
      await page.getByRole('heading', { level: 1, name: /footbridge/i }).waitFor()
      await page.waitForTimeout(500)
      await page.goBack()
      await studioReady(page)
      await expect.poll(() => statement(page)).toContain('at 210 Hz')
      await page.getByRole('tab', { name: 'History' }).click()
      await page.getByText(/1 · First/).waitFor()
      // The next edit meets no quarrel with itself.
      const saved = draftSaved(page, '"order":5')
      await word(page, 'Order').fill('5')
      await word(page, 'Order').press('Enter')
      await saved
      expect(await page.getByText(/changed in another window/).count()).toBe(0)
      await page.reload()
      await studioReady(page)
      expect(await statement(page)).toContain('order 5')
    })
  })

  it('opens a filter hard against half the rate, with its caution', async () => {
    await withPage({ state: await signedIn('designer') }, async ({ page }) => {
      await newDesign(page, 'Pump casing, high corner')
      await word(page, 'Edge').fill('550')
      await word(page, 'Edge').press('Enter')
      const saved = draftSaved(page, '"highpass"')
      await page.getByRole('button', { name: /^Response/ }).click()
      await page.getByRole('menuitemradio', { name: 'high-pass' }).click()
      await expect.poll(() => statement(page)).toContain('A high-pass Butterworth')
      await page.getByRole('list', { name: 'Cautions' }).waitFor()
      await picture(page, 'studio-high-corner-1440')
      await saved
      await page.reload()
      await studioReady(page)
      expect(await statement(page)).toContain('A high-pass Butterworth')
    })
  })
})

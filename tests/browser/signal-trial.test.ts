import { readFileSync } from 'node:fs'
import type { Page } from 'playwright-core'
import { describe, expect, it } from 'vitest'
import { makeWavBytes } from '../helpers/recordings'
import { signedIn } from './accounts'
import { picture, withPage } from './browser'
import { newDesign, statement } from './studio'

const RATE_HZ = 1200

/** A decimal comma, semicolons, a time column: a table as a logger set to a European locale writes it. */
function table(): Buffer {
  const rows = Array.from({ length: 6000 }, (_, n) => {
    const t = n / RATE_HZ
    const value =
      Math.sin(2 * Math.PI * 3 * t) + 0.3 * Math.sin(2 * Math.PI * 11 * t) + 0.1 * Math.sin(2 * Math.PI * 190 * t)
    return `${t.toFixed(6)};${value.toFixed(6)}`.replaceAll('.', ',')
  })
  return Buffer.from(['Time [s];deck acc [m/s²]', ...rows].join('\r\n'))
}

async function openTrial(page: Page): Promise<void> {
  await newDesign(page, 'Deck accelerometer, on trial')
  await page.getByRole('tab', { name: 'Signal trial' }).click()
  await page.getByRole('button', { name: 'Use the demo recording' }).waitFor()
}

const drop = (page: Page, name: string, mimeType: string, buffer: Buffer) =>
  page.locator('input[type=file]').first().setInputFiles({ name, mimeType, buffer })

describe('the signal trial', () => {
  it('runs the design over the demo recording and agrees with the predicted delay', async () => {
    await withPage({ state: await signedIn('designer') }, async ({ page }) => {
      await openTrial(page)
      await page.getByRole('button', { name: 'Use the demo recording' }).click()
      await page.getByText('Delay measured').waitFor()
      const line = (await page.locator('[aria-live=polite]', { hasText: 'Delay measured' }).textContent()) ?? ''
      const [measured, predicted] = [...line.matchAll(/(−?[\d.]+)\u2009(ms|µs|s)/g)].map(
        ([, digits = '', unit]) => Number(digits.replace('−', '-')) * (unit === 'ms' ? 1e-3 : unit === 'µs' ? 1e-6 : 1),
      )
      expect(measured).toBeGreaterThan(0)
      expect(Math.abs((measured ?? 0) - (predicted ?? 1))).toBeLessThan(0.2e-3)
      await picture(page, 'trial-demo-1440')

      await page.getByRole('radio', { name: /zero|forward/i }).check()
      await page.getByText(/^Offline only\./).waitFor()
      await picture(page, 'trial-zero-phase-1440')
    })
  })

  it('reads a table with decimal commas by its preview, and saves the result as one', async () => {
    await withPage({ state: await signedIn('designer') }, async ({ page }) => {
      await openTrial(page)
      await drop(page, 'deck.csv', 'text/csv', table())
      await page.getByRole('region', { name: 'How the file is read' }).waitFor()
      expect(await page.getByLabel('Delimiter').inputValue()).toMatch(/;|semicolon/)
      expect(await page.getByLabel('Decimal mark').inputValue()).toMatch(/,|comma/)
      await picture(page, 'trial-preview-1440')
      await page.getByRole('button', { name: 'Read the recording' }).click()
      await page.getByText('Delay measured').waitFor()
      await page.getByLabel('Save the result as').selectOption('csv')
      const [download] = await Promise.all([
        page.waitForEvent('download'),
        page.getByRole('button', { name: 'Save the result' }).click(),
      ])
      const lines = readFileSync(await download.path(), 'utf8')
        .trim()
        .split(/\r?\n/)
      expect(lines.length).toBeGreaterThanOrEqual(6001)
    })
  })

  it('does not run at another rate unasked, and redesigns at the file’s rate when told to', async () => {
    await withPage({ state: await signedIn('designer') }, async ({ page }) => {
      await openTrial(page)
      const frames = Array.from({ length: 8000 }, (_, n) => {
        const value = Math.round(4e6 * Math.sin((2 * Math.PI * 5 * n) / 2000))
        return [value, -value]
      })
      const wav = makeWavBytes({ frames, encoding: 'integer', bits: 24, sampleRateHz: 2000 })
      await drop(page, 'two-channels.wav', 'audio/wav', Buffer.from(wav))
      await page.getByText(/The recording was taken at/).waitFor()
      expect(await page.getByText('Delay measured').count()).toBe(0)
      await page.getByRole('button', { name: /^Redesign at/ }).click()
      await page.getByText('Delay measured').waitFor()
      expect(await statement(page)).toContain('run at 2 kHz')
      await page.getByRole('button', { name: 'Undo' }).click()
      await expect.poll(() => statement(page)).toContain('run at 1.2 kHz')
    })
  })

  it('says what is wrong with a broken file and goes on', async () => {
    await withPage({ state: await signedIn('designer') }, async ({ page }) => {
      await openTrial(page)
      const broken = Buffer.concat([Buffer.from('RIFF\x24\x00\x00\x00WAVEfmt '), Buffer.alloc(7, 1)])
      await drop(page, 'broken.wav', 'audio/wav', broken)
      await page.getByRole('tabpanel').getByRole('alert').first().waitFor()
      await drop(page, 'deck.csv', 'text/csv', table())
      await page.getByRole('region', { name: 'How the file is read' }).waitFor()
    })
  })
})

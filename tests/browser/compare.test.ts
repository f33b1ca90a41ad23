import type { Page } from 'playwright-core'
import { describe, expect, it } from 'vitest'
import { signedIn } from './accounts'
import { expectAccessible, expectFits, picture, withPage } from './browser'
import { newDesign, openDesign, studioReady, word } from './studio'

const plain = (text: string) => text.replace(/[\u2009\u00a0]/g, ' ')
const region = (page: Page, name: string) => page.getByRole('region', { name, exact: true })
const soon = <Value>(ask: () => Value) => expect.poll(ask, { timeout: 10_000 })

async function saveVersion(page: Page, number: number, note: string): Promise<void> {
  await page.getByRole('button', { name: `Save version ${number}` }).click()
  await page.getByLabel(/What changed/).fill(note)
  await page.keyboard.press('Enter')
  await page.getByRole('button', { name: `Version ${number} saved` }).waitFor()
}

async function requireBand(page: Page, kind: string): Promise<void> {
  await page.getByRole('button', { name: 'Add a line' }).click()
  await page.getByRole('menuitem', { name: kind, exact: true }).click()
}

/** A design with two versions and a draft, all with a sheet of two lines. Answers with the design's address. */
async function threeSides(page: Page, title: string): Promise<string> {
  await newDesign(page, title)
  await requireBand(page, 'Band to keep')
  await requireBand(page, 'Band to lose')
  await saveVersion(page, 1, 'First')
  for (const [order, number] of [
    ['6', 2],
    ['8', 3],
  ] as const) {
    await word(page, 'Order').fill(order)
    await word(page, 'Order').press('Enter')
    await page.getByText(/^Draft saved/).waitFor()
    if (number === 2) await saveVersion(page, number, 'Steeper')
  }
  return new URL(page.url()).pathname
}

/** As the candidates' drawer keeps them. */
const firCandidate = {
  label: 'Kaiser-windowed FIR, 41 taps',
  spec: {
    format: 1,
    fir: {
      kind: 'windowed',
      window: 'kaiser',
      response: 'lowpass',
      taps: 41,
      bands: [
        { fromHz: 0, toHz: 80, gain: 1 },
        { fromHz: 160, toHz: 500, gain: 0 },
      ],
      attenuationDb: 50,
    },
    sampleRateHz: 1000,
    budget: { magnitudeDb: 0.1, phaseDegrees: 1, removeDelay: false },
  },
}

async function keepCandidates(page: Page, design: string, list: readonly unknown[]): Promise<void> {
  const id = design.split('/').at(-1) ?? ''
  await page.evaluate(([key, text]) => sessionStorage.setItem(key, text), [
    `polewright.candidates.${id}`,
    JSON.stringify(list),
  ] as const)
}

for (const [width, scheme] of [
  [1440, 'light'],
  [390, 'dark'],
] as const) {
  describe(`comparing at ${width} in ${scheme}`, () => {
    it('holds versions, the draft and a candidate beside each other, line by line', async () => {
      await withPage({ width, scheme, state: await signedIn('designer') }, async ({ page }) => {
        const design = await threeSides(page, `Compared at ${width} in ${scheme}`)

        // From the history: three ticked, old to new.
        await page.getByRole('tab', { name: 'History' }).click()
        await page.getByRole('checkbox', { name: 'Compare the draft' }).check()
        await page.getByRole('checkbox', { name: 'Compare version 2' }).check()
        await page.getByRole('checkbox', { name: 'Compare version 1' }).check()
        await picture(page, `history-ticked-${width}-${scheme}`)
        await expectAccessible(page)
        await page.getByRole('link', { name: 'Compare 3' }).click()
        await page.waitForURL(/\/compare\?sides=1,2,draft$/)
        await page.getByRole('heading', { level: 1, name: 'Version 1 beside version 2 and the draft' }).waitFor()

        // With a candidate, which the tab keeps, and whose rate is another.
        await keepCandidates(page, design, [firCandidate])
        await page.goto(`${design}/compare?sides=1,2,draft,candidate-1`)
        await page.getByRole('heading', { level: 1, name: /and candidate 1$/ }).waitFor()
        const requirements = region(page, 'Requirements of all sides')
        await requirements.waitFor()
        await soon(() => requirements.getByRole('row').count()).toBe(4)
        expect(await requirements.getByRole('columnheader').allInnerTexts()).toEqual([
          'Requirement',
          'Version 1',
          'Version 2',
          'The draft',
          'Candidate 1',
        ])
        const [, keep = '', lose = ''] = (await requirements.getByRole('row').allInnerTexts()).map(plain)
        expect(keep).toMatch(/^Keep /)
        expect(lose).toMatch(/^Lose /)
        for (const row of [keep, lose]) expect(row.match(/met|missed/g)?.length).toBeGreaterThanOrEqual(4)

        const statements = page.getByRole('list', { name: 'Statements' })
        expect(await statements.getByText(/Of another kind than version 1/).innerText()).toContain('an FIR filter')
        expect(await statements.locator('ins').first().innerText()).toBe('order 6')
        const figures = plain(await region(page, 'Figures of all sides').innerText())
        expect(figures).toContain('Taps')
        expect(figures).toContain('no analog original')

        for (const unit of ['°', 'µs', 'dB']) {
          await page.getByRole('radio', { name: unit, exact: true }).check()
          await soon(() => page.getByRole('radio', { name: unit, exact: true }).isChecked()).toBe(true)
        }
        await page.getByText('Values of the plots').click()
        const values = region(page, 'Values of the plots')
        await soon(() => values.getByRole('columnheader').count()).toBe(1 + 3 * (4 + 3))
        expect(plain(await values.innerText())).toContain('500 Hz')
        await picture(page, `compare-four-${width}-${scheme}`)
        await expectFits(page)
        await expectAccessible(page)

        // Another base turns the differences; a side is left out.
        await page.getByRole('link', { name: /^Make it the base ?: candidate 1$/ }).click()
        await page.getByRole('heading', { level: 1, name: /^Candidate 1 beside version 1/ }).waitFor()
        await page.getByText('Difference from candidate 1 in').waitFor()
        await page.getByRole('link', { name: /^Leave out ?: version 2$/ }).click()
        await page.waitForURL(/\?sides=candidate-1,1,draft$/)
        await page.getByRole('heading', { level: 1, name: 'Candidate 1 beside version 1 and the draft' }).waitFor()

        // From the lists.
        await page.getByLabel('Base').selectOption('2')
        await page.getByLabel('Beside it').selectOption('draft')
        await page.getByLabel('Side 3').selectOption('')
        await page.getByRole('button', { name: 'Compare 2' }).click()
        await page.waitForURL(/\?sides=2,draft$/)
        await page.getByRole('heading', { level: 1, name: 'Version 2 beside the draft' }).waitFor()
      })
    })
  })
}

describe('a comparison that lacks a side', () => {
  it('says which candidate is lost or wrong and what isn’t there, and shows the rest', async () => {
    await withPage({ state: await signedIn('designer') }, async ({ page }) => {
      await openDesign(page, /Deck accelerometer/)
      const design = new URL(page.url()).pathname
      await keepCandidates(page, design, [{ ...firCandidate, spec: { ...firCandidate.spec, sampleRateHz: 'fast' } }])
      await page.goto(`${design}/compare?sides=1,candidate-1,candidate-2,99`)
      await page.getByText(/Candidate 1 can’t be read here/).waitFor()
      await page.getByText(/Candidate 2 isn’t kept here/).waitFor()
      await page.getByText(/Version 99 isn’t there/).waitFor()
      await page.getByRole('heading', { level: 1, name: 'Version 1' }).waitFor()
      await region(page, 'Figures of all sides').waitFor()
      await expectAccessible(page)
    })
  })

  it('opens links of old', async () => {
    await withPage({ state: await signedIn('designer') }, async ({ page }) => {
      await openDesign(page, /Deck accelerometer/)
      await page.goto(`${new URL(page.url()).pathname}/compare?a=1&b=3`)
      await page.getByRole('heading', { level: 1, name: 'Version 1 beside version 3' }).waitFor()
    })
  })
})

describe('comparing by keyboard alone', () => {
  it('ticks versions, opens the comparison and changes its difference', async () => {
    await withPage({ state: await signedIn('designer') }, async ({ page }) => {
      await openDesign(page, /Deck accelerometer/)
      await page.getByRole('tab', { name: 'History' }).click()
      for (const name of ['Compare version 1', 'Compare version 2', 'Compare version 3']) {
        await page.getByRole('checkbox', { name }).focus()
        await page.keyboard.press('Space')
      }
      await page.getByRole('link', { name: 'Compare 3' }).focus()
      await page.keyboard.press('Enter')
      await page.getByRole('heading', { level: 1, name: 'Version 1 beside version 2 and version 3' }).waitFor()
      await page.getByRole('radio', { name: 'dB', exact: true }).focus()
      await page.keyboard.press('ArrowRight')
      await soon(() => page.getByRole('radio', { name: '°', exact: true }).isChecked()).toBe(true)

      // A table that is wider than the page scrolls by the arrow keys.
      await region(page, 'Figures of all sides').focus()
      expect(await page.evaluate(() => document.activeElement?.getAttribute('aria-label'))).toBe('Figures of all sides')

      // The lists are the browser's own.
      await page.getByLabel('Side 3').focus()
      await page.keyboard.press('Home')
      await soon(() => page.getByLabel('Side 3').inputValue()).toBe('')
      await page.keyboard.press('Tab')
      await page.keyboard.press('Tab')
      await page.keyboard.press('Enter')
      await page.waitForURL(/\?sides=1,2$/)
      await page.getByRole('link', { name: 'Open in studio' }).click()
      await studioReady(page)
    })
  })
})

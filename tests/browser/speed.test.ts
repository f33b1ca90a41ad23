import { describe, expect, it } from 'vitest'
import { signedIn } from './accounts'
import { withPage } from './browser'
import { foldLine, newDesign, openDesign } from './studio'

const FIRST_PAGE_SCRIPT_LIMIT = 300 * 1024

describe('how light and quick the studio is', () => {
  it('opens with less than 300 kB of script, as it travels', async () => {
    await withPage({ state: await signedIn('designer') }, async ({ page, context }) => {
      await page.goto('/projects')
      const href = await page
        .getByRole('link', { name: /Deck accelerometer/ })
        .first()
        .getAttribute('href')
      for (const path of ['/projects', href ?? '']) {
        const fresh = await context.newPage()
        const session = await context.newCDPSession(fresh)
        await session.send('Network.enable')
        await session.send('Network.setCacheDisabled', { cacheDisabled: true })
        const scripts = new Map<string, number>()
        const kinds = new Map<string, string>()
        session.on('Network.responseReceived', ({ requestId, type }) => kinds.set(requestId, type))
        session.on('Network.loadingFinished', ({ requestId, encodedDataLength }) => {
          if (kinds.get(requestId) === 'Script') scripts.set(requestId, encodedDataLength)
        })
        await fresh.goto(path, { waitUntil: 'load' })
        const bytes = [...scripts.values()].reduce((sum, size) => sum + size, 0)
        console.log(`script of ${path === href ? 'the studio' : path}: ${Math.round(bytes / 1024)} kB compressed`)
        expect(scripts.size).toBeGreaterThan(0)
        expect(bytes).toBeLessThan(FIRST_PAGE_SCRIPT_LIMIT)
        await fresh.close()
      }
    })
  })

  it('redraws a drag of the fold line and prints how long an edit takes to the painted frame', async () => {
    await withPage({ state: await signedIn('designer') }, async ({ page }) => {
      await newDesign(page, 'Deck accelerometer, pulled about')
      // What opens after the plots has arrived: a hand comes later than that.
      await page.waitForLoadState('networkidle')
      const grip = await foldLine(page).boundingBox()
      if (!grip) throw new Error('The fold line has no handle.')
      const [x, y] = [grip.x + grip.width / 2, grip.y + grip.height / 2]
      await page.mouse.move(x, y)
      await page.mouse.down()
      await page.evaluate(() => {
        const times: number[] = []
        let inTheirFrame = 0
        Object.assign(globalThis, { dragTimes: times, paintedInFrame: () => inTheirFrame })
        const paints = () => Number(document.querySelector<HTMLElement>('canvas[data-paints]')?.dataset.paints)
        // From the pointer's event to the end of the work that the next frame paints.
        addEventListener(
          'pointermove',
          () => {
            const start = performance.now()
            const before = paints()
            requestAnimationFrame(() => {
              if (paints() > before) inTheirFrame += 1
              const channel = new MessageChannel()
              channel.port1.onmessage = () => times.push(performance.now() - start)
              channel.port2.postMessage(null)
            })
          },
          { capture: true },
        )
      })
      for (let step = 1; step <= 120; step += 1) await page.mouse.move(x - (step <= 60 ? step : 120 - step), y)
      await page.mouse.up()
      const times = await page.evaluate(() => (globalThis as unknown as { dragTimes: number[] }).dragTimes)
      const sorted = [...times].sort((left, right) => left - right)
      console.log(
        `drag: ${times.length} moves painted, median ${sorted[Math.floor(sorted.length / 2)]?.toFixed(1)} ms to the frame`,
      )
      const inTheirFrame = await page.evaluate(() =>
        (globalThis as unknown as { paintedInFrame(): number }).paintedInFrame(),
      )
      console.log(`drag: ${inTheirFrame} of ${times.length} moves repainted the curves in their own frame`)
      expect(times.length).toBeGreaterThan(10)
      // A move that leaves the rate as it is repaints nothing.
      expect(inTheirFrame / times.length).toBeGreaterThan(0.8)
    })
  })

  it('does not repaint the traces when only the pointer moves', async () => {
    await withPage({ state: await signedIn('designer') }, async ({ page }) => {
      await openDesign(page, /Deck accelerometer/)
      const plots = await page.getByRole('slider', { name: 'Crosshair frequency' }).boundingBox()
      if (!plots) throw new Error('The plots can’t be found.')
      // The static layer counts its paints on its own canvas.
      const paints = () =>
        page
          .getByRole('region', { name: 'Response of the design' })
          .locator('canvas[data-paints]')
          .first()
          .getAttribute('data-paints')
      const before = await paints()
      expect(Number(before)).toBeGreaterThan(0)
      for (let step = 0; step < 30; step += 1)
        await page.mouse.move(plots.x + plots.width * (0.2 + step / 60), plots.y + plots.height * 0.3)
      const readOut = page.getByRole('region', { name: 'Response of the design' })
      expect(await readOut.textContent()).toMatch(/at .*Hz/)
      expect(await paints()).toBe(before)
    })
  })
})

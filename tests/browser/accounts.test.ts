import { describe, expect, it } from 'vitest'
import { mailsTo } from './accounts'
import { picture, withPage } from './browser'

describe('an account of one’s own', () => {
  it('is made, left, recovered by a mailed link, and has a team of its own', async () => {
    await withPage({}, async ({ page }) => {
      const email = `new-designer-${Date.now()}@crane-yard.example`
      await page.goto('/sign-up')
      await page.getByLabel(/e-?mail/i).fill(email)
      await page.getByLabel('How others will see you').fill('designer, crane yard')
      await page
        .getByLabel(/^password/i)
        .first()
        .fill('slow sway of the jib 27')
      await page.getByRole('button', { name: /create account/i }).click()
      await page.waitForURL(/\/projects/)
      await picture(page, 'empty-projects-1440')

      await page.getByRole('button', { name: /sign out/i }).click()
      await page.goto('/projects')
      await page.waitForURL(/\/sign-in/)

      await page.goto('/forgot')
      await page.getByLabel(/e-?mail/i).fill(email)
      await page.getByRole('button', { name: /send|mail/i }).click()
      await expect.poll(() => mailsTo(email).length).toBeGreaterThan(0)
      const link = /https?:\/\/\S+\/reset#\S+/.exec(mailsTo(email).at(-1)?.text ?? '')?.[0]
      expect(link).toBeDefined()

      await page.goto(link ?? '')
      await page
        .getByLabel(/password/i)
        .first()
        .fill('a steadier jib, 28 m')
      await page
        .getByRole('button', { name: /password/i })
        .last()
        .click()
      await page.waitForURL((url) => !url.pathname.startsWith('/reset'))

      // The link works once; the new password works, the old one doesn't.
      await page.goto('/sign-in')
      if (page.url().includes('/sign-in')) {
        await page.getByLabel(/e-?mail/i).fill(email)
        await page.getByLabel(/^password/i).fill('slow sway of the jib 27')
        await page.getByRole('button', { name: /^sign in/i }).click()
        await page.getByRole('alert').first().waitFor()
        await page.getByLabel(/^password/i).fill('a steadier jib, 28 m')
        await page.getByRole('button', { name: /^sign in/i }).click()
        await page.waitForURL(/\/projects/)
      }
      await page.goto('/team')
      expect(await page.locator('main').textContent()).toContain('owner')
    })
  })
})

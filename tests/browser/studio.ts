import type { Page } from 'playwright-core'

/** Opens a demo design by its title, from the list of projects as a person would. */
export async function openDesign(page: Page, title: RegExp): Promise<void> {
  await page.goto('/projects')
  await page.getByRole('link', { name: title }).first().click()
  await studioReady(page)
}

/** The studio has taken charge of its page: traces are painted and the statement can be edited. */
export async function studioReady(page: Page): Promise<void> {
  await page.getByRole('heading', { level: 1, name: 'Statement' }).waitFor()
  await page.waitForFunction(() => {
    const heading = document.querySelector('h1')
    return heading !== null && Object.keys(heading).some((key) => key.startsWith('__reactProps$'))
  })
  await foldLine(page).waitFor()
}

export const foldLine = (page: Page) => page.getByRole('slider', { name: /fold line/i })

export const word = (page: Page, name: string) => page.getByRole('spinbutton', { name, exact: true })

/** A design of the test's own, so that tests don't meet in the demo's. */
export async function newDesign(page: Page, title: string): Promise<void> {
  await page.goto('/projects')
  await page
    .getByRole('link', { name: /footbridge/i })
    .first()
    .click()
  await page.getByLabel('Title of the new design').fill(title)
  await page.getByRole('button', { name: 'Create design' }).click()
  await page.waitForURL(/\/designs\//)
  await studioReady(page)
}

/** The server's answer to the draft that holds these words of its spec; ask before the edit, await after it. */
export const draftSaved = (page: Page, words: string) =>
  page.waitForResponse(
    (answer) => answer.url().endsWith('/draft') && answer.ok() && (answer.request().postData() ?? '').includes(words),
  )

/** The statement as it reads, with plain spaces. */
export async function statement(page: Page): Promise<string> {
  return page.evaluate(() => {
    const heading = document.querySelector('h1')
    if (!heading) return ''
    const walk = (node: Node): string => {
      if (node instanceof HTMLInputElement) return node.value
      if (
        node instanceof HTMLElement &&
        (node.getAttribute('aria-hidden') === 'true' || node.getAttribute('role') === 'alert')
      )
        return ''
      if (node.nodeType === Node.TEXT_NODE) return node.textContent ?? ''
      return [...node.childNodes].map(walk).join('')
    }
    return walk(heading).replace(/[\u2009\u00a0]/g, ' ')
  })
}

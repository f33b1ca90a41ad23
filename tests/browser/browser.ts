import { mkdirSync } from 'node:fs'
import { join } from 'node:path'
import { AxeBuilder } from '@axe-core/playwright'
import { chromium, type Browser, type BrowserContext, type Page } from 'playwright-core'
import { afterAll, expect, inject } from 'vitest'

/** Where pictures go; they are looked at by people, and not kept in the repository. */
const pictures = join(import.meta.dirname, 'out')

const flags = [
  '--no-sandbox',
  '--disable-gpu',
  '--disable-quic',
  '--no-first-run',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-sync',
]

export type Scheme = 'light' | 'dark'

export interface PageOptions {
  /** In CSS pixels; a narrow one is also taken as a touch screen. */
  readonly width?: 1440 | 390
  readonly scheme?: Scheme
  /** Cookies and storage of another context, to begin signed in. */
  readonly state?: Awaited<ReturnType<BrowserContext['storageState']>>
}

export interface OpenPage {
  readonly page: Page
  readonly context: BrowserContext
  /** What went wrong in the page by itself: console errors, uncaught exceptions, refused policies, answers of 500 and above. */
  readonly problems: readonly string[]
  close(): Promise<void>
}

let browser: Promise<Browser> | undefined

function theBrowser(): Promise<Browser> {
  browser ??= chromium.launch({ executablePath: inject('chromium'), args: flags })
  return browser
}

afterAll(async () => {
  await (await browser)?.close()
  browser = undefined
})

/** The address of a path on the server under test. */
export const at = (path: string): string => new URL(path, inject('baseUrl')).href

/** A page in a context of its own; `withPage` is the safer way where one action needs it. */
export async function openPage({ width = 1440, scheme = 'light', state }: PageOptions = {}): Promise<OpenPage> {
  const narrow = width === 390
  const context = await (
    await theBrowser()
  ).newContext({
    baseURL: inject('baseUrl'),
    viewport: { width, height: narrow ? 844 : 900 },
    colorScheme: scheme,
    reducedMotion: 'reduce',
    hasTouch: narrow,
    acceptDownloads: true,
    locale: 'en-GB',
    ...(state ? { storageState: state } : {}),
  })
  const page = await context.newPage()
  const problems: string[] = []
  page.on('console', (message) => {
    if (message.type() === 'error') problems.push(`console: ${message.text()} (${page.url()})`)
  })
  page.on('pageerror', (error) => problems.push(`exception: ${error.stack ?? error.message}`))
  page.on('response', (response) => {
    if (response.status() >= 500) problems.push(`answer ${response.status()}: ${response.url()}`)
  })
  return { page, context, problems, close: () => context.close() }
}

/** Opens a page for one action and closes it, whatever happens. The page must have had no problem of its own; a failure leaves a picture. */
export async function withPage(options: PageOptions, action: (open: OpenPage) => Promise<void>): Promise<void> {
  const open = await openPage(options)
  try {
    await action(open)
    expect(open.problems).toEqual([])
  } catch (error) {
    await picture(
      open.page,
      `failed-${(expect.getState().currentTestName ?? 'test').replace(/[^a-z0-9]+/gi, '-').toLowerCase()}`,
    )
    throw error
  } finally {
    await open.close()
  }
}

/** Keeps a picture of the page, the whole of it, beside the other pictures. */
export async function picture(
  page: Page,
  name: string,
  { fullPage = true }: { fullPage?: boolean } = {},
): Promise<string> {
  mkdirSync(pictures, { recursive: true })
  const path = join(pictures, `${name}.png`)
  await page.screenshot({ path, fullPage })
  return path
}

/** axe finds nothing, by the rules of WCAG 2.2 A and AA and its own best practices. */
export async function expectAccessible(page: Page): Promise<void> {
  const { violations } = await new AxeBuilder({ page }).analyze()
  const found = violations.map(
    ({ id, help, nodes }) => `${id}: ${help}\n  ${nodes.map((node) => node.html.slice(0, 200)).join('\n  ')}`,
  )
  expect(found).toEqual([])
}

/** Nothing sticks out to the right: the page itself never scrolls sideways. */
export async function expectFits(page: Page): Promise<void> {
  const { inner, scroll } = await page.evaluate(() => ({
    inner: document.documentElement.clientWidth,
    scroll: document.documentElement.scrollWidth,
  }))
  expect(scroll).toBeLessThanOrEqual(inner)
}

import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { chromium, type BrowserContext, type Page } from 'playwright-core'
import { findProgram } from '../../backend/scripts/debian.mjs'

/** A Chromium of one test's own, with a profile that goes with it. */
export interface TestBrowser {
  /** A new page; errors its scripts throw, and what its content security policy refuses, are kept in `errors`. */
  newPage(): Promise<Page>
  context: BrowserContext
  /** What went wrong in the pages so far: a test that ends should find this empty. */
  errors: string[]
  close(): Promise<void>
}

export interface BrowserOptions {
  /** CSS pixels; default 1280 × 800. */
  viewport?: { width: number; height: number }
  /** Touch screen and mobile layout, as on a phone. */
  mobile?: boolean
}

const flags = [
  '--no-sandbox',
  '--disable-gpu',
  '--disable-quic',
  '--no-first-run',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-sync',
  '--disable-dev-shm-usage',
]

/**
 * Starts Debian's Chromium without a window. Two people signed in at once are two browsers.
 * @throws when Chromium is not installed: a test that cannot run must not pass
 */
export async function launchBrowser({ viewport, mobile = false }: BrowserOptions = {}): Promise<TestBrowser> {
  const executablePath = findProgram('chromium')
  if (!executablePath) {
    throw new Error('Chromium is not installed: sudo apt-get install --no-install-recommends chromium')
  }
  const profile = mkdtempSync(join(tmpdir(), 'maslin-chromium-'))
  const context = await chromium.launchPersistentContext(profile, {
    executablePath,
    headless: true,
    args: flags,
    viewport: viewport ?? { width: 1280, height: 800 },
    isMobile: mobile,
    hasTouch: mobile,
    locale: 'en-US',
    timezoneId: 'UTC',
    acceptDownloads: true,
  })
  context.setDefaultTimeout(15_000)
  const errors: string[] = []
  const watch = (page: Page) => {
    page.on('pageerror', (error) => errors.push(`${page.url()}: ${error.message}`))
    page.on('console', (message) => {
      if (message.type() === 'error' && /Content Security Policy/.test(message.text())) {
        errors.push(`${page.url()}: ${message.text()}`)
      }
    })
  }
  context.pages().forEach(watch)
  context.on('page', watch)
  return {
    newPage: () => context.newPage(),
    context,
    errors,
    close: async () => {
      await context.close()
      rmSync(profile, { recursive: true, force: true })
    },
  }
}

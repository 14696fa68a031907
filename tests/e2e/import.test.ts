import type { Offer, PriceImport } from '@maslin/shared'
import { MAX_IMPORT_CHARACTERS } from '@maslin/shared'
import { readFileSync } from 'node:fs'
import type { Page } from 'playwright-core'
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { inProject } from '../../backend/scripts/paths.mjs'
import { startApplication, type Application } from '../support/application'
import { launchBrowser, type TestBrowser } from '../support/browser'
import { fetched, showOnFailure, signInAs, waiting, watch, type Troubles } from './browsing'

let application: Application
let browser: TestBrowser
let page: Page
let troubles: Troubles
let farmId = ''

beforeAll(async () => {
  application = await startApplication()
  browser = await launchBrowser()
})
afterAll(async () => {
  await browser?.close()
  await application?.stop()
})
beforeEach(async () => {
  page = await browser.newPage()
  troubles = watch(page)
  showOnFailure(page)
  farmId = await signInAs(page, application, 'owner')
  await openImport()
})
afterEach(async () => {
  await page.close()
  expect(troubles.list).toEqual([])
  expect(browser.errors).toEqual([])
})

const openImport = () => page.goto(`${application.origin}/farms/${farmId}/prices/import`)
const give = (name: string, content: string | Buffer) =>
  page.getByLabel('Choose a file').setInputFiles({ name, mimeType: 'text/csv', buffer: Buffer.from(content) })
const rows = () => page.getByRole('table').getByRole('row')

/** All that a list could change: offers with their prices, and the imports. */
async function kept(): Promise<string> {
  const { items: offers } = await fetched<{ items: Offer[] }>(page, `/farms/${farmId}/offers`)
  const { items: imports } = await fetched<{ items: PriceImport[] }>(page, `/farms/${farmId}/price-imports`)
  return JSON.stringify({ offers, imports: imports.map(({ id }) => id) })
}

describe('a file that is no price list', () => {
  /** One row, repeated until the text is one character longer than a list may be. */
  function oversized(): string {
    const row = 'Oats grain,50 lb,14.25,2026-11-19\n'
    const text = 'Feed,Package,Price,Date\n' + row.repeat(Math.ceil(MAX_IMPORT_CHARACTERS / row.length))
    return text.slice(0, MAX_IMPORT_CHARACTERS + 1)
  }
  const files: [string, string, string | Buffer, string][] = [
    ['an empty file', 'empty.csv', '', 'This file is empty. Nothing was changed.'],
    ['nothing but blank lines', 'blank.csv', '\n \n\n', 'This file is empty. Nothing was changed.'],
    [
      'bytes that are no text',
      'picture.csv',
      Buffer.from([1, 0, 255, 7, 0, 3, 0, 200, 13, 0]),
      'This is not a text file',
    ],
    [
      'a spreadsheet file',
      'prices.csv',
      Buffer.from('PK\u0003\u0004rest of the archive'),
      'This is a spreadsheet file.',
    ],
    ['a list one character over the limit', 'huge.csv', oversized(), 'larger than a price list can be'],
  ]
  it.each(files)('is refused with words: %s', async (_what, name, content, words) => {
    const before = await kept()
    await give(name, content)
    const problem = page.getByRole('alert').filter({ hasText: words })
    await problem.getByText('Nothing was changed').waitFor()
    expect(await page.getByRole('button', { name: /^Apply/ }).count()).toBe(0)
    expect(await kept()).toBe(before)
    // The page is ready for the right file.
    await give(
      'right.csv',
      'Feed,Supplier,Package,Price,Date\nOats grain,Quillet Feed Store,50 lb,14.25,2026-11-19\n',
    )
    await page.getByRole('button', { name: 'Apply one row' }).waitFor()
    expect(await kept()).toBe(before)
  })

  it('says what is missing where no column can be a feed, a package or a price', async () => {
    const before = await kept()
    await give('weather.csv', 'Day,Rain,Wind\nMonday,3 mm,calm\nTuesday,0 mm,storm\n')
    await page.getByText(/^Still needed: .*Price/).waitFor()
    expect(await page.getByRole('button', { name: 'Nothing to apply' }).isDisabled()).toBe(true)
    expect(await page.getByRole('button', { name: /^Apply/ }).count()).toBe(0)
    expect(await kept()).toBe(before)
  })

  it('refuses pasted blanks, and reads a pasted list', async () => {
    const text = page.getByLabel('The list as text')
    await text.fill('   ')
    expect(await page.getByRole('button', { name: 'Read the list' }).isDisabled()).toBe(true)
    await text.fill('Feed;Supplier;Package;Price;Date\nOats grain;Quillet Feed Store;50 lb;14,25;2026-11-19')
    await page.getByRole('button', { name: 'Read the list' }).click()
    await rows().filter({ hasText: '$14.25 / 50 lb' }).waitFor()
  })
})

describe('a list with errors', () => {
  const file = 'quillet-feed-store-with-errors.csv'
  /** Line in the file and what is said about it; the two other rows are good. */
  const wrong: [number, string][] = [
    [3, 'not a price'],
    [4, 'a unit not known here'],
    [5, 'none of your feeds is called that'],
    [6, 'below zero'],
    [7, 'no package given'],
    [8, 'no feed named'],
    [9, 'the feed has no test weight'],
    [10, 'not a date in the order chosen above'],
  ]

  it('shows each row with its reason, applies the good ones, keeps the bad ones to be downloaded', async () => {
    await page.getByLabel('Choose a file').setInputFiles(inProject('data/price-lists', file))
    await expect.poll(() => rows().count(), waiting).toBe(11)
    const lines = await Promise.all((await rows().all()).slice(1).map((row) => row.innerText()))
    for (const [at, text] of lines.entries()) {
      const reason = wrong.find(([line]) => line === at + 2)?.[1]
      if (reason) expect(text, `line ${at + 2}`).toContain(reason)
      expect(/\berror\b/.test(text), `line ${at + 2} is an error: ${text}`).toBe(reason !== undefined)
    }

    await page.getByRole('button', { name: 'Apply 2 rows' }).click()
    await page.getByRole('main').getByText('The list is applied').waitFor()
    const leftOut = page.getByRole('heading', { name: 'Rows that were left out (8)' })
    await leftOut.waitFor()
    for (const [, reason] of wrong) await rows().filter({ hasText: reason }).waitFor()
    const { items: offers } = await fetched<{ items: Offer[] }>(page, `/farms/${farmId}/offers`)
    const priceOf = (feed: string) =>
      offers.find((one) => one.feedName === feed && one.supplierName === 'Quillet Feed Store')?.current
    expect(priceOf('Oats grain')).toMatchObject({ date: '2026-11-19' })
    expect(Number(priceOf('Oats grain')?.price)).toBe(14.25)
    expect(Number(priceOf('Sheep mineral, no added copper')?.price)).toBe(22.1)
    expect(priceOf('Barley grain')?.date).not.toBe('2026-11-19')

    const download = page.waitForEvent('download')
    await page.getByRole('button', { name: 'Download these rows as CSV' }).click()
    const saved = await download
    expect(saved.suggestedFilename()).toBe('quillet-feed-store-with-errors-left-out.csv')
    const csv = readFileSync(await saved.path(), 'utf8')
    expect(csv).toContain('Moon dust')
    expect(csv.trim().split(/\r?\n/)).toHaveLength(9)
    for (const [, reason] of wrong) expect(csv).toContain(reason)
  })

  it('still lists them among the past imports', async () => {
    await page.goto(`${application.origin}/farms/${farmId}/prices/imports`)
    const item = page.getByRole('listitem').filter({ hasText: file })
    await item.getByText(/8 errors/).waitFor()
    await item.getByRole('button', { name: 'Rows left out' }).click()
    for (const [, reason] of wrong) await rows().filter({ hasText: reason }).waitFor()
  })

  it('is the same list the second time: nothing but the errors is left', async () => {
    await page.getByLabel('Choose a file').setInputFiles(inProject('data/price-lists', file))
    await expect
      .poll(
        () =>
          rows()
            .filter({ has: page.getByText('same', { exact: true }) })
            .count(),
        waiting,
      )
      .toBe(2)
    expect(await page.getByRole('button', { name: 'Nothing to apply' }).isDisabled()).toBe(true)
  })

  it('lets a name be matched by hand, or its rows be left out', async () => {
    await give(
      'names.csv',
      'Feed,Supplier,Package,Price,Date\nMoon dust,Quillet Feed Store,50 lb,9.99,2026-11-19\n',
    )
    await page.getByText('none of your feeds is called that').waitFor()
    const feed = page.getByRole('combobox', { name: 'Feed for “Moon dust”' })
    await feed.fill('Wheat bran')
    await page.getByRole('option', { name: 'Wheat bran', exact: true }).click()
    await rows().filter({ hasText: 'Wheat bran, $9.99 / 50 lb' }).waitFor()
    await page.getByRole('button', { name: 'Apply one row' }).waitFor()
    await feed.fill('Leave')
    await page.getByRole('option', { name: 'Leave its rows out' }).click()
    await page.getByRole('button', { name: 'Nothing to apply' }).waitFor()
    await rows()
      .filter({ has: page.getByText('left out', { exact: true }) })
      .waitFor()
  })
})

describe('who may import', () => {
  it('not a hand: no file is asked for', async () => {
    await signInAs(page, application, 'hand')
    await openImport()
    await page.getByText('You can read this page.').waitFor()
    expect(await page.getByLabel('Choose a file').count()).toBe(0)
  })
})

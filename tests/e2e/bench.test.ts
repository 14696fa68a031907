import type { MixSummary } from '@maslin/shared'
import type { Locator, Page } from 'playwright-core'
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { startApplication, type Application } from '../support/application'
import { launchBrowser, type TestBrowser } from '../support/browser'
import {
  amountOf,
  costShown,
  fetched,
  headline,
  likeShown,
  settled,
  showOnFailure,
  signInAs,
  solvedApart,
  waiting,
  watch,
  type Troubles,
} from './browsing'

/** The demo's mix for late-pregnant ewes: 4.4 Mcal and 214 g of protein a head and day beside the farm's own hay. */
const mixName = 'Ewe mix before lambing'

let application: Application
let browser: TestBrowser
let page: Page
let troubles: Troubles
let farmId = ''

beforeAll(async () => {
  application = await startApplication()
  browser = await launchBrowser({ viewport: { width: 1440, height: 900 } })
  page = await browser.newPage()
  farmId = await signInAs(page, application, 'owner')
  for (const { id, name } of await fetchMixes()) mixIds.set(name, id)
  await page.close()
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
})
afterEach(async () => {
  await page.close()
  expect(troubles.list).toEqual([])
  expect(browser.errors).toEqual([])
})

/** The mixes of the demo by name, as they were when the tests began. */
const mixIds = new Map<string, string>()
async function openBench(name = mixName): Promise<void> {
  await page.goto(`${application.origin}/farms/${farmId}/mixes/${mixIds.get(name)}`)
  await page.getByRole('heading', { level: 1, name }).waitFor()
  await costShown(page)
}
/** The bounds of a limit, which open its editor. */
const bounds = (limit: string): Locator => page.getByRole('button', { name: new RegExp(`Change ${limit}$`) })
/** The fields of the open editor. */
const least = () => page.getByRole('textbox', { name: 'At least', exact: true })
const most = () => page.getByRole('textbox', { name: 'At most', exact: true })
/** Types a new least into a limit and sets it. */
async function setLeast(limit: string, value: string): Promise<void> {
  await bounds(limit).click()
  await least().fill(value)
  await least().press('Enter')
}
const costBecomes = (check: (cost: number) => boolean, why: string) =>
  expect.poll(async () => check(amountOf(await costShown(page))), { ...waiting, message: why }).toBe(true)
const undo = () => page.getByRole('button', { name: 'Undo', exact: true })
const redo = () => page.getByRole('button', { name: 'Redo', exact: true })
const save = () => page.getByRole('button', { name: 'Save mix' })

describe('an edit on the bench', () => {
  it('is solved at once, taken back and brought again', async () => {
    await openBench()
    const before = await costShown(page)
    expect(await undo().isDisabled()).toBe(true)

    await setLeast('Crude protein', '240')
    await costBecomes((cost) => cost > amountOf(before), 'more protein costs more')
    const dearer = await costShown(page)
    await bounds('Crude protein').getByText('at least 240 g').waitFor()
    await page
      .getByRole('status')
      .filter({ hasText: `Least cost ${dearer}` })
      .waitFor({ state: 'attached' })

    await undo().click()
    await expect.poll(() => costShown(page), waiting).toBe(before)
    await bounds('Crude protein').getByText('at least 214 g').waitFor()
    expect(await undo().isDisabled()).toBe(true)

    await redo().click()
    await expect.poll(() => costShown(page), waiting).toBe(dearer)
    await page.keyboard.press('Control+z')
    await expect.poll(() => costShown(page), waiting).toBe(before)
  })

  it('is refused in its field where it makes no sense, and nothing changes', async () => {
    await openBench()
    const before = await costShown(page)
    await bounds('Crude protein').click()
    await least().fill('much')
    await page.getByText('Not a number.').waitFor()
    expect(await page.getByRole('button', { name: 'Set it', exact: true }).isDisabled()).toBe(true)
    await least().fill('240')
    await most().fill('200')
    await page.getByText('The least is above the most.').waitFor()
    expect(await page.getByRole('button', { name: 'Set it', exact: true }).isDisabled()).toBe(true)
    await most().press('Escape')
    expect(await costShown(page)).toBe(before)
    expect(await undo().isDisabled()).toBe(true)
  })

  it('that leaves no mix says which limits conflict; a proposal makes one possible', async () => {
    await openBench()
    const before = await costShown(page)
    await setLeast('Metabolizable energy', '5.5')
    const conflict = page.getByRole('region', { name: 'No mix is possible with these limits' })
    await conflict.getByText('Metabolizable energy, at least 5.5 Mcal').waitFor()
    await headline(page).getByText('No mix is possible').waitFor()
    expect(await headline(page).getByText('$').count()).toBe(0)

    const proposal = conflict
      .getByRole('button', { name: /^Change it: Metabolizable energy: at least/ })
      .first()
    const [, loosened] =
      /at least ([\d.]+) Mcal/.exec((await proposal.getAttribute('aria-label')) ?? '') ?? []
    await proposal.click()
    await expect.poll(() => conflict.count(), waiting).toBe(0)
    await costBecomes((cost) => cost > amountOf(before), 'more energy costs more')
    await bounds('Metabolizable energy').getByText(`at least ${loosened} Mcal`).waitFor()
    expect(Number(loosened)).toBeLessThan(5.5)
    expect(Number(loosened)).toBeGreaterThan(4.4)
  })

  it('tries a price and takes it back', async () => {
    await openBench()
    const before = await costShown(page)
    await page.getByRole('button', { name: /Try another price for Corn grain, shelled$/ }).click()
    const price = page.getByLabel(/^Price of Corn grain, shelled for/)
    await price.fill('5.05')
    await page.getByRole('button', { name: 'Try it', exact: true }).click()
    await costBecomes((cost) => cost > amountOf(before), 'dearer corn makes a dearer mix')
    await headline(page).getByText('With tried prices: Corn grain, shelled.').waitFor()

    await page.getByRole('button', { name: /Try another price for Corn grain, shelled$/ }).click()
    await page.getByRole('button', { name: 'Back to the price of the day', exact: true }).click()
    await expect.poll(() => costShown(page), waiting).toBe(before)
    await expect.poll(() => headline(page).getByText('With tried prices').count(), waiting).toBe(0)
  })

  it('is kept by saving, and the cost of the saved mix is the one the API works out', async () => {
    await openBench('Ewe mix after lambing')
    const before = await costShown(page)
    await setLeast('Crude protein', '450')
    await expect.poll(() => costShown(page), waiting).not.toBe(before)
    await save().click()
    await page.getByRole('button', { name: 'Saved', exact: true }).waitFor()
    await page.reload()
    const cost = await costShown(page)
    await bounds('Crude protein').getByText('at least 450 g').waitFor({ state: 'attached' })
    const { answer } = await solvedApart(page)
    if (answer.status !== 'optimal') throw new Error(`the mix is ${answer.status}`)
    expect(cost).toBe(likeShown(answer.cost.perHeadDay, cost))
  })
})

describe('the curve', () => {
  it('of a feed is drawn when its name is pressed, and told in words', async () => {
    await openBench()
    const name = page.getByRole('button', { name: /Show the price curve of Soybean meal, solvent, 44 %$/ })
    await name.click()
    expect(await name.getAttribute('aria-pressed')).toBe('true')
    const curve = page.getByRole('region', { name: 'Soybean meal, solvent, 44 %, price' })
    await curve.getByRole('img', { name: /Today \$405/ }).waitFor()
    await curve.getByText(/From \$[\d.,]+.* more costs \$/).waitFor()
    await curve.getByRole('button', { name: 'Table' }).click()
    await expect.poll(() => curve.getByRole('row').count(), waiting).toBeGreaterThan(3)
  })

  it('of a limit tries the value that is typed', async () => {
    await openBench()
    const before = await costShown(page)
    await page.getByRole('button', { name: /Show the curve of Crude protein$/ }).click()
    const curve = page.getByRole('region', { name: 'Crude protein, at least' })
    await curve.getByLabel('Value to try').fill('230')
    await curve.getByRole('button', { name: 'Try', exact: true }).click()
    await bounds('Crude protein').getByText('at least 230 g').waitFor()
    await costBecomes((cost) => cost > amountOf(before), 'more protein costs more')
  })
})

describe('the keyboard alone', () => {
  it('reaches a limit, changes it and goes on from there', async () => {
    await openBench()
    const before = await costShown(page)
    const target = bounds('Crude protein')
    await page.getByRole('button', { name: 'Save scenario' }).focus()
    for (let presses = 0; !(await isFocused(target)); presses += 1) {
      if (presses > 80) throw new Error('Tab does not reach the limit')
      await page.keyboard.press('Tab')
    }
    await page.keyboard.press('Enter')
    await expect.poll(() => isFocused(least()), waiting).toBe(true)
    await page.keyboard.press('Control+a')
    await page.keyboard.type('235')
    await page.keyboard.press('Enter')
    await costBecomes((cost) => cost > amountOf(before), 'more protein costs more')
    await target.getByText('at least 235 g').waitFor()
    await expect
      .poll(() => isFocused(target), { ...waiting, message: 'focus is back on the limit' })
      .toBe(true)
  })
})
const isFocused = (locator: Locator) => locator.evaluate((element) => element === document.activeElement)

describe('leaving the bench', () => {
  it('asks while a change is not saved: staying keeps it, leaving drops it', async () => {
    await openBench()
    await setLeast('Crude protein', '241')
    await bounds('Crude protein').getByText('at least 241 g').waitFor()
    await settled(page)
    await page.getByRole('link', { name: 'Feeds', exact: true }).click()
    const dialog = page.getByRole('dialog', { name: 'Leave without saving?' })
    await dialog.getByRole('button', { name: 'Stay here' }).click()
    await bounds('Crude protein').getByText('at least 241 g').waitFor()

    await page.getByRole('link', { name: 'Feeds', exact: true }).click()
    await dialog.getByRole('button', { name: 'Leave without saving' }).click()
    await page.getByRole('heading', { level: 1, name: 'Feeds' }).waitFor()
    await openBench()
    await bounds('Crude protein').getByText('at least 214 g').waitFor()
  })

  it('asks the browser too before the tab is closed', async () => {
    await openBench()
    await setLeast('Crude protein', '242')
    await bounds('Crude protein').getByText('at least 242 g').waitFor()
    const asked = page.waitForEvent('dialog')
    const closing = page.close({ runBeforeUnload: true })
    const dialog = await asked
    expect(dialog.type()).toBe('beforeunload')
    await dialog.accept()
    await closing
  })
})

describe('working on a revision again', () => {
  it('waits for it, however late it comes, so that no edit is taken back', async () => {
    await page.goto(`${application.origin}/farms/${farmId}/scenarios`)
    await page.getByRole('link', { name: 'Ewes before lambing' }).click()
    const again = page.getByRole('button', { name: 'Work on it again' })
    await again.waitFor()
    let release = () => {}
    const held = new Promise<void>((resolve) => (release = resolve))
    await page.route('**/revisions/*', async (route) => {
      await held
      await route.continue()
    })
    const asked = page.waitForRequest('**/revisions/*')
    const mix = page.waitForResponse(/\/mixes\/[^/]+$/)
    await again.click()
    await Promise.all([asked, mix.then((answer) => answer.finished())])
    // Time enough for a bench that does not wait to be drawn.
    for (let rounds = 0; rounds < 5; rounds += 1) await fetchMixes()
    await page.evaluate(
      () => new Promise((drawn) => requestAnimationFrame(() => requestAnimationFrame(drawn))),
    )
    expect(await bounds('Crude protein').count()).toBe(0)
    release()
    await costShown(page)
    await setLeast('Crude protein', '243')
    await bounds('Crude protein').getByText('at least 243 g').waitFor()
    await settled(page)
    await bounds('Crude protein').getByText('at least 243 g').waitFor()
  })
})

describe('what a role may do on the bench', () => {
  it('lets a hand read the mix and change nothing', async () => {
    await signInAs(page, application, 'hand')
    await page.goto(`${application.origin}/farms/${farmId}/mixes`)
    await page.getByRole('link', { name: mixName }).click()
    await page.getByText('You can read this mix.').waitFor()
    await page.getByRole('heading', { level: 2, name: /^What goes in/ }).waitFor()
    expect(await costShown(page)).toMatch(/\d/)
    const names = await page.getByRole('main').getByRole('button').allInnerTexts()
    expect(names.filter((name) => /save|ask for review|undo|redo|add a|change/i.test(name))).toEqual([])
    for (const name of [
      /^Save/,
      /^Ask for review/,
      'Undo',
      'Redo',
      /Change /,
      /Try another price/,
      /^More about/,
    ]) {
      expect(await page.getByRole('main').getByRole('button', { name }).count(), String(name)).toBe(0)
    }
    await page.goto(`${application.origin}/farms/${farmId}/mixes`)
    await page.getByRole('link', { name: mixName }).waitFor()
    expect(await page.getByRole('button', { name: /^(New mix|Remove)/ }).count()).toBe(0)
  })

  it('lets an advisor try values and save none', async () => {
    await signInAs(page, application, 'advisor')
    const [mix] = (await fetchMixes()).filter(({ name }) => name === mixName)
    await openBench()
    await page.getByText('You may try values here.').waitFor()
    const before = await costShown(page)
    await setLeast('Crude protein', '240')
    await costBecomes((cost) => cost > amountOf(before), 'more protein costs more')
    expect(await page.getByRole('button', { name: /^Save/ }).count()).toBe(0)
    await page.getByRole('link', { name: 'Feeds', exact: true }).click()
    await page.getByRole('heading', { level: 1, name: 'Feeds' }).waitFor()
    expect((await fetchMixes()).find(({ id }) => id === mix?.id)?.version).toBe(mix?.version)
  })
})

async function fetchMixes(): Promise<MixSummary[]> {
  if (!page.url().startsWith('http')) await page.goto(application.origin)
  return (await fetched<{ items: MixSummary[] }>(page, `/farms/${farmId}/mixes`)).items
}

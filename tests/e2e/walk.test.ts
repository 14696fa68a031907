import type { Revision } from '@maslin/shared'
import { randomUUID } from 'node:crypto'
import type { Page } from 'playwright-core'
import { afterAll, beforeAll, beforeEach, describe, expect, it, onTestFailed } from 'vitest'
import { inProject } from '../../backend/scripts/paths.mjs'
import { startApplication, type Application } from '../support/application'
import { launchBrowser, type TestBrowser } from '../support/browser'
import { password } from '../support/people'
import {
  amountOf,
  choose,
  costShown,
  fetched,
  headline,
  likeShown,
  settled,
  showOnFailure,
  signIn,
  solvedApart,
  waiting,
  watch,
  type Troubles,
} from './browsing'

const list = (name: string) => inProject('data/price-lists', name)
const owner = { name: 'Rowan Teasdale', email: `${randomUUID()}@farm.example`, farm: 'Slapewath Farm' }
const advisor = { name: 'Dr. Edda Swale', email: `${randomUUID()}@advice.example`, farm: 'Swale Advice' }
const mixName = 'Ewe mix before lambing'
const scenarioName = 'Ewes before lambing'

let application: Application
let browsers: TestBrowser[] = []
let keeper: Page
let reviewer: Page
let troubles: Troubles[]

beforeAll(async () => {
  application = await startApplication({ demo: false })
  browsers = await Promise.all([launchBrowser(), launchBrowser()])
  ;[keeper, reviewer] = (await Promise.all(browsers.map((browser) => browser.newPage()))) as [Page, Page]
  troubles = [watch(keeper), watch(reviewer)]
})
afterAll(async () => {
  await Promise.all(browsers.map((browser) => browser.close()))
  await application?.stop()
})
/** Each step starts where the one before ended. */
let stopped = false
beforeEach(() => {
  if (stopped) throw new Error('an earlier step of the walk has failed')
  onTestFailed(() => {
    stopped = true
  })
  showOnFailure(keeper)
  showOnFailure(reviewer)
})

async function signUp(page: Page, who: typeof owner): Promise<void> {
  await page.goto(application.origin)
  await page.getByRole('main').getByRole('link', { name: 'Create an account' }).click()
  await page.getByLabel('Your name').fill(who.name)
  await page.getByLabel('E-mail address').fill(who.email)
  await page.getByLabel('Password', { exact: true }).fill(password)
  await page.getByLabel('Name of the farm').fill(who.farm)
  await page.getByRole('button', { name: 'Create the account and the farm' }).click()
  await page.getByRole('heading', { level: 1, name: `Welcome to ${who.farm}` }).waitFor()
}
const menu = (page: Page, name: string) =>
  page.getByRole('navigation', { name: 'Pages' }).getByRole('link', { name, exact: true }).click()

/** Chooses a list, says whose it is, and waits until each row is shown with what it would do. */
async function readList(page: Page, name: string, supplier: string): Promise<void> {
  await menu(page, 'Prices')
  await page.getByRole('link', { name: 'Import a price list' }).first().click()
  await page.getByLabel('Choose a file').setInputFiles(list(name))
  const whose = page.getByRole('combobox', { name: 'Supplier of every row' })
  await whose.fill(supplier)
  await whose.press('Tab')
}
const rowsOf = (page: Page, state: string) =>
  page
    .getByRole('table')
    .getByRole('row')
    .filter({ has: page.getByText(state, { exact: true }) })

describe('from an empty farm to an approved mix', () => {
  let firstCost = ''
  let approvedHash = ''
  let scenarioPath = ''

  it('signs up a keeper, and an advisor with a farm of their own', async () => {
    await signUp(keeper, owner)
    await signUp(reviewer, advisor)
    await expect(keeper.getByRole('banner').innerText()).resolves.toContain(owner.farm)
  })

  it('copies feeds from the book', async () => {
    await menu(keeper, 'Feeds')
    await keeper.getByRole('link', { name: 'Copy from the book' }).first().click()
    for (const name of [
      'Corn grain, shelled',
      'Barley grain',
      'Oats grain',
      'Wheat grain',
      'Soybean meal, solvent, 44 %',
      'Soybean hulls',
      'Wheat middlings',
      'Corn gluten feed, dried',
      'Distillers dried grains with solubles, corn',
      'Molasses, cane',
      'Limestone, ground, feed grade',
    ]) {
      await keeper.getByRole('checkbox', { name, exact: true }).check()
    }
    await keeper.getByText('11 feeds chosen').waitFor()
    await keeper.getByRole('button', { name: 'Copy to your feeds' }).click()
    await keeper.getByRole('heading', { level: 1, name: 'Feeds' }).waitFor()
    await keeper.getByText('11 feeds', { exact: true }).waitFor()
  })

  it('imports a supplier’s price list: every row is new', async () => {
    await readList(keeper, 'tarn-hollow-mill.csv', 'Tarn Hollow Mill')
    await expect.poll(() => rowsOf(keeper, 'new').count(), waiting).toBe(11)
    await keeper.getByRole('button', { name: 'Apply 11 rows' }).click()
    await keeper.getByRole('main').getByText('The list is applied').waitFor()
    await keeper.getByRole('link', { name: 'See the prices' }).click()
    await keeper.getByRole('row').filter({ hasText: 'Barley grain' }).filter({ hasText: '$5.28' }).waitFor()
    await keeper.getByText('11 offers', { exact: true }).first().waitFor()
  })

  it('describes late-pregnant ewes with twins, fed hay', async () => {
    await menu(keeper, 'Groups')
    await keeper.getByRole('link', { name: 'Describe a group' }).first().click()
    await keeper.getByLabel('Name of the group').fill('Ewes with twins')
    await choose(keeper, 'Species', 'Sheep')
    await choose(keeper, 'Class', 'Ewes')
    await choose(keeper, 'Stage', 'Late pregnancy, last 4 weeks')
    await keeper.getByLabel('Heads').fill('38')
    await keeper.getByLabel('Weight of one animal').fill('70 kg')
    await keeper.getByText('read as 154 lb (70 kg)').waitFor()
    await keeper.getByLabel('Young carried or suckled').fill('2')
    await keeper.getByRole('button', { name: 'Add a feed' }).click()
    // The hay is not among the farm's feeds yet: the book's becomes one of them.
    await choose(keeper, 'Feed', /^Grass hay, mixed/)
    await keeper.getByRole('button', { name: 'Remove Grass hay, mixed' }).waitFor()
    // NRC 1985, 70 kg ewe, last four weeks with 180 to 225 % lambing: 4.4 Mcal and 214 g of protein a day.
    const needs = keeper.getByRole('table')
    await needs
      .getByRole('row')
      .filter({ hasText: 'Metabolizable energy' })
      .getByText('4.4 Mcal')
      .first()
      .waitFor()
    await needs.getByRole('row').filter({ hasText: 'Crude protein' }).getByText('214 g').first().waitFor()
    await keeper.getByRole('button', { name: 'Save' }).click()
    await keeper.getByRole('heading', { level: 1, name: 'Ewes with twins' }).waitFor()
  })

  it('gets the cheapest mix, whose cost is the one the API works out', async () => {
    await keeper.getByRole('link', { name: 'Start a mix' }).click()
    await keeper.getByLabel('Name of the mix').fill(mixName)
    await keeper.getByRole('button', { name: 'Make the mix' }).click()
    await keeper.getByRole('heading', { level: 1, name: mixName }).waitFor()
    firstCost = await costShown(keeper)
    const { answer } = await solvedApart(keeper)
    if (answer.status !== 'optimal') throw new Error(`the mix is ${answer.status}`)
    expect(firstCost).toBe(likeShown(answer.cost.perHeadDay, firstCost))
    expect(amountOf(firstCost)).toBeGreaterThan(0)
    await headline(keeper).getByText('Cheapest, checked by certificate').waitFor()
    await expect(keeper.getByRole('main').innerText()).resolves.toContain(
      '38 sheep of 154 lb, late pregnancy',
    )
  })

  it('saves it as a scenario', async () => {
    await keeper.getByRole('button', { name: 'Save scenario' }).click()
    const dialog = keeper.getByRole('dialog', { name: 'Save scenario' })
    await dialog.getByLabel('Name', { exact: true }).fill(scenarioName)
    await dialog.getByRole('button', { name: 'Save scenario' }).click()
    await dialog.getByText('Scenario saved.').waitFor()
    await dialog.getByRole('button', { name: 'Close' }).click()
  })

  it('re-imports the list with new prices and sees which rows changed', async () => {
    await readList(keeper, 'tarn-hollow-mill-new-prices.csv', 'Tarn Hollow Mill')
    await expect.poll(() => rowsOf(keeper, 'changed').count(), waiting).toBe(4)
    expect(await rowsOf(keeper, 'same').count()).toBe(7)
    expect(await rowsOf(keeper, 'new').count()).toBe(0)
    await rowsOf(keeper, 'changed').filter({ hasText: 'Barley grain' }).getByText('was $5.28').waitFor()
    await keeper.getByRole('button', { name: 'Apply 4 rows' }).click()
    await keeper.getByRole('main').getByText('The list is applied').waitFor()
  })

  it('sees the new cost of the mix, and how far it moved from the scenario', async () => {
    await menu(keeper, 'Mixes')
    await keeper.getByRole('link', { name: mixName }).click()
    await keeper.getByRole('heading', { level: 1, name: mixName }).waitFor()
    const cost = await costShown(keeper)
    const { answer } = await solvedApart(keeper)
    if (answer.status !== 'optimal') throw new Error(`the mix is ${answer.status}`)
    // No price of the list has fallen, and one that rose is of a feed in the mix.
    expect(amountOf(cost)).toBeGreaterThan(amountOf(firstCost))
    expect(cost).toBe(likeShown(answer.cost.perHeadDay, cost))
    await headline(keeper)
      .getByText(/^\$[\d.]+ more$/)
      .waitFor()
  })

  it('asks for review', async () => {
    await keeper.getByRole('button', { name: 'Ask for review' }).click()
    const dialog = keeper.getByRole('dialog', { name: 'Ask for review' })
    await choose(keeper, 'Save as', `revision 2 of ${scenarioName}`)
    await dialog.getByLabel('What the advisor should look at').fill('With the prices of the new list.')
    await dialog.getByRole('button', { name: 'Save and submit' }).click()
    await dialog.getByText('Submitted for review.').waitFor()
    await dialog.getByRole('button', { name: 'Open it' }).click()
    await keeper.getByRole('heading', { level: 1, name: scenarioName }).waitFor()
    await keeper.getByText('waiting for review').first().waitFor()
    scenarioPath = new URL(keeper.url()).pathname
  })

  it('adds the advisor by e-mail', async () => {
    await menu(keeper, 'Farm')
    await keeper.getByLabel('E-mail address of their account').fill(advisor.email)
    await choose(keeper, 'Role', 'Advisor')
    await keeper.getByRole('button', { name: 'Add a member' }).click()
    await keeper.getByRole('listitem').filter({ hasText: advisor.email }).waitFor()
  })

  it('shows the advisor what waits; they comment and approve', async () => {
    await reviewer.getByRole('button', { name: 'your account' }).click()
    await reviewer.getByRole('button', { name: 'Sign out' }).click()
    await reviewer.waitForURL(application.origin + '/')
    await signIn(reviewer, application.origin, advisor.email, password)
    await menu(reviewer, 'Reviews')
    const waits = reviewer.getByRole('row').filter({ hasText: owner.farm })
    await waits.getByText('With the prices of the new list.').waitFor()
    await waits.getByRole('link', { name: scenarioName }).click()
    await reviewer.getByRole('heading', { level: 1, name: scenarioName }).waitFor()
    await settled(reviewer)

    await reviewer.getByLabel('Comment on revision 2').fill('Step it up over ten days.')
    await reviewer.getByRole('button', { name: 'Add the comment' }).click()
    await reviewer.getByRole('listitem').filter({ hasText: 'Step it up over ten days.' }).waitFor()

    const decision = reviewer.getByRole('region', { name: 'Your decision on revision 2' })
    await decision.getByLabel('What you think of it, and why').fill('Energy and protein are met.')
    for (const caution of await decision.getByRole('checkbox').all()) await caution.check()
    await decision.getByRole('button', { name: 'Approve' }).click()
    await reviewer.getByText('Revision 2 approved').waitFor()
    await menu(reviewer, 'Reviews')
    await reviewer.getByText('Nothing waits for you').waitFor()
  })

  it('shows the owner that it is approved, and by whom', async () => {
    await keeper.goto(application.origin + scenarioPath)
    const entry = keeper.getByRole('listitem').filter({ hasText: 'Revision 2 approved' })
    await entry.getByText('Energy and protein are met.').waitFor()
    await entry.getByText(advisor.name).waitFor()
    approvedHash = (await storedRevision(2)).contentHash
    await keeper.getByText(approvedHash).waitFor()
  })

  it('keeps the approved revision as it was when a change becomes a new one', async () => {
    await keeper.getByRole('button', { name: 'Work on it again' }).click()
    await keeper.getByRole('heading', { level: 1, name: mixName }).waitFor()
    const before = await costShown(keeper)
    await keeper.getByRole('button', { name: /Change Phosphorus$/ }).click()
    await keeper.getByRole('textbox', { name: 'At least', exact: true }).fill('5')
    await keeper.getByRole('textbox', { name: 'At least', exact: true }).press('Enter')
    await expect.poll(() => costShown(keeper), waiting).not.toBe(before)
    await keeper.getByRole('button', { name: 'Save scenario' }).click()
    const dialog = keeper.getByRole('dialog', { name: 'Save scenario' })
    await dialog.getByText(`revision 3 of ${scenarioName}`).waitFor()
    await dialog.getByRole('button', { name: 'Save scenario' }).click()
    await dialog.getByRole('button', { name: 'Open it' }).click()
    await keeper.getByText('revision 3 of 3').waitFor()
    const states = keeper.getByRole('region', { name: 'Revisions' }).getByRole('row')
    await expect
      .poll(
        async () => (await states.allInnerTexts()).map((text) => /draft|approved/.exec(text)?.[0]),
        waiting,
      )
      .toEqual(['draft', 'approved', 'draft'])

    const [approved, changed] = [await storedRevision(2), await storedRevision(3)]
    expect(approved.contentHash).toBe(approvedHash)
    expect(approved.state).toBe('approved')
    expect(changed.contentHash).not.toBe(approvedHash)
    await keeper.getByRole('button', { name: 'Revision 2' }).click()
    await keeper.getByText(approvedHash).waitFor()
    expect(await costShown(keeper)).toBe(before)
  })

  it('went through without an error in either browser', async () => {
    expect(troubles.flatMap((one) => one.list)).toEqual([])
    expect(browsers.flatMap((browser) => browser.errors)).toEqual([])
  })

  async function storedRevision(number: number): Promise<Revision> {
    return fetched<Revision>(keeper, `${scenarioPath}/revisions/${number}`)
  }
})

import type { FeedSummary, Group, MixSummary, Scenario, ScenarioSummary, Session } from '@maslin/shared'
import { randomUUID } from 'node:crypto'
import type { Page } from 'playwright-core'
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { inProject } from '../../backend/scripts/paths.mjs'
import { startApplication, type Application } from '../support/application'
import { accessibilityViolations } from '../support/axe'
import { launchBrowser, type TestBrowser } from '../support/browser'
import { password } from '../support/people'
import { costShown, fetched, settled, showOnFailure, signInAs, watch, type Troubles } from './browsing'

const sizes = [
  { width: 1440, height: 900 },
  { width: 390, height: 844 },
]
const [wide, phone] = sizes as [(typeof sizes)[number], (typeof sizes)[number]]

let application: Application
let browser: TestBrowser
let page: Page
let troubles: Troubles
let farm = ''
const ids = { hay: '', group: '', mix: '', submitted: '', approved: '' }
let compared = ''

beforeAll(async () => {
  application = await startApplication()
  browser = await launchBrowser({ viewport: wide })
  page = await browser.newPage()
  await page.goto(application.origin)
  farm = `/farms/${await signInAs(page, application, 'owner')}`
  const itemsOf = async <T>(path: string) => (await fetched<{ items: T[] }>(page, farm + path)).items
  const named = <T extends { id: string; name: string }>(items: T[], name: string): string => {
    const found = items.find((one) => one.name === name)
    if (!found) throw new Error(`the demo has no ${name}`)
    return found.id
  }
  ids.hay = named(await itemsOf<FeedSummary>('/feeds'), 'Upper meadow hay, first cut 2026')
  ids.group = named(await itemsOf<Group>('/groups'), 'Twin-bearing ewes, last four weeks')
  ids.mix = named(await itemsOf<MixSummary>('/mixes'), 'Ewe mix before lambing')
  const scenarios = await itemsOf<ScenarioSummary>('/scenarios')
  ids.submitted = named(scenarios, 'Ewes after lambing')
  ids.approved = named(scenarios, 'Ewes before lambing')
  const { revisions } = await fetched<Scenario>(page, `${farm}/scenarios/${ids.approved}`)
  expect(revisions.length).toBeGreaterThan(1)
  compared = `left=${ids.approved}:1&right=${ids.approved}:2`
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
})
afterEach(async () => {
  await page.close()
  expect(troubles.list).toEqual([])
  expect(browser.errors).toEqual([])
})

async function open(path: string): Promise<void> {
  await page.goto(application.origin + path)
  await settled(page)
}
/** Waits for what fades and moves: half-way colours are no colours of the page. */
const still = () =>
  page.evaluate(async () => {
    const ending = document
      .getAnimations()
      .filter((one) => one.effect?.getComputedTiming().iterations !== Infinity)
    await Promise.allSettled(ending.map((one) => one.finished))
  })

/** Menus and dialogs. An open menu covers a part of what lies under it, which then looks too small to press. */
const overlay = '.v-overlay-container'

/** The page as it stands fits its window and breaks no rule of WCAG 2.2 A and AA. */
async function sound(what: string, within?: string): Promise<void> {
  await still()
  const { wanted, given } = await page.evaluate(() => ({
    wanted: document.documentElement.scrollWidth,
    given: document.documentElement.clientWidth,
  }))
  expect(wanted, `${what} scrolls sideways`).toBeLessThanOrEqual(given)
  expect(await accessibilityViolations(page, within), what).toEqual([])
}
async function soundInEachSize(): Promise<void> {
  for (const size of sizes) {
    await page.setViewportSize(size)
    await settled(page)
    await sound(`at ${size.width} × ${size.height}`)
  }
}
const main = () => page.getByRole('main')
const button = (name: string | RegExp) =>
  main().getByRole('button', { name, exact: typeof name === 'string' })

describe('signed out', () => {
  beforeEach(() => browser.context.clearCookies())

  it.each(['/', '/sign-in', '/sign-up', '/no-such-page'])('%s', async (path) => {
    await page.goto(application.origin + path)
    await page.getByRole('heading', { level: 1 }).waitFor()
    await soundInEachSize()
  })

  it('a page for members only asks to sign in', async () => {
    // Whether somebody is signed in is asked first, then whether they may be again.
    troubles.expectStatus(401)
    troubles.expectStatus(401)
    await page.goto(`${application.origin}${farm}/feeds`)
    await page.getByRole('heading', { level: 1, name: 'Sign in' }).waitFor()
    await soundInEachSize()
  })

  it('the sign-up page with every field missing', async () => {
    await page.goto(`${application.origin}/sign-up`)
    await button('Create the account and the farm').click()
    await page.getByText('At least 10 characters.', { exact: true }).waitFor()
    await soundInEachSize()
  })

  it('the sign-in page that refuses', async () => {
    await page.goto(`${application.origin}/sign-in`)
    await page.getByLabel('E-mail address').fill('nobody@farm.example')
    await page.getByLabel('Password', { exact: true }).fill('not the password')
    troubles.expectStatus(401)
    await button('Sign in').click()
    await page.getByText('No account has this e-mail address and password together.').waitFor()
    await soundInEachSize()
  })
})

it('the first-run path of an empty farm', async () => {
  await browser.context.clearCookies()
  const answer = await page.request.post(`${application.origin}/api/v1/auth/sign-up`, {
    data: {
      name: 'Nan Holme',
      email: `${randomUUID()}@farm.example`,
      password,
      farmName: 'Holme',
      units: 'metric',
    },
  })
  const session = (await answer.json()) as Session
  await open(`/farms/${session.memberships[0]?.farm.id}`)
  await page.getByRole('heading', { name: 'Welcome to Holme' }).waitFor()
  await soundInEachSize()
  for (const path of ['feeds', 'prices', 'groups', 'mixes', 'scenarios']) {
    await open(`/farms/${session.memberships[0]?.farm.id}/${path}`)
    await sound(`empty ${path} on a phone`)
  }
})

describe('an owner', () => {
  beforeEach(() => signInAs(page, application, 'owner'))

  it.each([
    'feeds',
    'feeds/new',
    'feeds/book',
    'prices',
    'prices/import',
    'prices/imports',
    'groups',
    'groups/new',
    'mixes',
    'scenarios',
    'farm',
    'no-such-page',
  ])('%s', async (path) => {
    await open(`${farm}/${path}`)
    await soundInEachSize()
  })

  it('a feed, and one of its values being edited', async () => {
    await open(`${farm}/feeds/${ids.hay}`)
    await soundInEachSize()
    await button('Edit Crude protein').click()
    await page.getByLabel(/^Crude protein, /).waitFor()
    await sound('editing on a phone')
  })

  it('the price list with errors, as it is read', async () => {
    await open(`${farm}/prices/import`)
    await page
      .getByLabel('Choose a file')
      .setInputFiles(inProject('data/price-lists/quillet-feed-store-with-errors.csv'))
    await button(/^Apply/).waitFor()
    await soundInEachSize()
  })

  it('a group', async () => {
    await open(`${farm}/groups/${ids.group}`)
    await main().getByText('Expected intake of dry matter').waitFor()
    await soundInEachSize()
  })

  it('a new mix being made', async () => {
    await open(`${farm}/mixes?group=${ids.group}`)
    await page.getByLabel('Name of the mix').waitFor()
    await soundInEachSize()
  })

  it('the bench, with a limit in focus and its curve drawn', async () => {
    await open(`${farm}/mixes/${ids.mix}`)
    await costShown(page)
    const focus = button(/Show the curve of Crude protein$/)
    await focus.click()
    for (const size of sizes) {
      await page.setViewportSize(size)
      await page
        .getByRole('region', { name: 'Crude protein, at least' })
        .getByRole('slider', { name: /^Try a value of/ })
        .waitFor()
      await sound(`at ${size.width} × ${size.height}`)
    }
  })

  it('the bench with folded limits, tables and details open', async () => {
    await open(`${farm}/mixes/${ids.mix}`)
    await costShown(page)
    for (const group of await main().locator('summary').all()) await group.click()
    // Each becomes the button that hides its table.
    while ((await button('Table').count()) > 0) await button('Table').first().click()
    await button('How we know').click()
    await soundInEachSize()
  })

  it('the editors, menus and dialogs of the bench', async () => {
    await open(`${farm}/mixes/${ids.mix}`)
    await costShown(page)
    await button(/Change Crude protein$/).click()
    await page.getByRole('textbox', { name: 'At least', exact: true }).waitFor()
    await sound('the editor of a limit', overlay)
    await page.keyboard.press('Escape')
    await button('More about Corn grain, shelled').click()
    await page.getByText('Limits of this feed').waitFor()
    await sound('the menu of a feed', overlay)
    await page.getByText('Limits of this feed').click()
    await page.getByText('Limits of Corn grain, shelled').waitFor()
    await sound('limits of a feed')
    await page.getByRole('button', { name: 'Cancel' }).click()
    await page.setViewportSize(phone)
    await button('Save scenario').click()
    await page.getByRole('dialog', { name: 'Save scenario' }).waitFor()
    await sound('saving a scenario on a phone')
  })

  it('a mix that is not possible', async () => {
    await open(`${farm}/mixes/${ids.mix}`)
    await costShown(page)
    await button(/Change Metabolizable energy$/).click()
    await page.getByRole('textbox', { name: 'At least', exact: true }).fill('5.5')
    await page.keyboard.press('Enter')
    await page.getByRole('heading', { name: 'No mix is possible with these limits' }).waitFor()
    await soundInEachSize()
  })

  it('a scenario, and two revisions compared', async () => {
    await open(`${farm}/scenarios/${ids.approved}`)
    await page.getByRole('heading', { level: 2, name: 'Revisions' }).waitFor()
    await soundInEachSize()
    await page.setViewportSize(wide)
    await open(`${farm}/scenarios/compare?${compared}`)
    await page.getByRole('table').first().waitFor()
    await soundInEachSize()
  })

  it('a question before something is removed, the account’s menu, the menu on a phone', async () => {
    await open(`${farm}/farm`)
    await button('Remove Jory Lathom').click()
    await page.getByText('Jory Lathom will no longer see this farm.').waitFor()
    await sound('the question')
    await page.getByRole('button', { name: 'Cancel' }).click()
    await page.getByRole('button', { name: 'your account' }).click()
    await page.getByRole('button', { name: 'Sign out' }).waitFor()
    await sound('the account’s menu', overlay)
    await page.keyboard.press('Escape')
    await page.setViewportSize(phone)
    await page.getByRole('button', { name: 'Menu', exact: true }).click()
    await page.getByRole('link', { name: 'Groups', exact: true }).waitFor()
    await sound('the menu')
    await page.getByRole('link', { name: 'Groups', exact: true }).click()
    await page.getByRole('heading', { level: 1, name: 'Groups' }).waitFor()
  })

  it('the bench and the feeds in the dark', async () => {
    await page.emulateMedia({ colorScheme: 'dark' })
    await open(`${farm}/feeds`)
    const [red = 255] = await page.evaluate(() =>
      (
        getComputedStyle(document.querySelector('.v-application') ?? document.body).backgroundColor.match(
          /\d+/g,
        ) ?? []
      ).map(Number),
    )
    expect(red, 'the page is dark').toBeLessThan(80)
    await sound('the feeds')
    await open(`${farm}/mixes/${ids.mix}`)
    await costShown(page)
    await soundInEachSize()
  })
})

describe('an advisor', () => {
  beforeEach(() => signInAs(page, application, 'advisor'))

  it('the reviews, and the decision on one', async () => {
    await open('/reviews')
    await page.getByRole('link', { name: 'Ewes after lambing' }).waitFor()
    await soundInEachSize()
    await open(`${farm}/scenarios/${ids.submitted}`)
    await page.getByRole('region', { name: /^Your decision on revision/ }).waitFor()
    await soundInEachSize()
  })
})

describe('a hand', () => {
  beforeEach(() => signInAs(page, application, 'hand'))

  it('the bench to read', async () => {
    await open(`${farm}/mixes/${ids.mix}`)
    await page.getByText('You can read this mix.').waitFor()
    await soundInEachSize()
  })
})

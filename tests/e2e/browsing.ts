import type { MixDraft, Session, SolveResponse } from '@maslin/shared'
import type { Locator, Page } from 'playwright-core'
import { expect, onTestFailed } from 'vitest'
import type { Application } from '../support/application'

/** What went wrong in a page without stopping it: errors in its console, requests that failed or were refused. */
export interface Troubles {
  /** Each with the page it happened on. */
  list: string[]
  /** Says that an answer of this status is meant to come once, such as a refusal a test asks for. */
  expectStatus(status: number): void
}

/** Watches a page from now on. A request the page itself gave up, such as an overtaken solve, is no trouble. */
export function watch(page: Page): Troubles {
  const list: string[] = []
  const expected: number[] = []
  const note = (text: string) => list.push(`${new URL(page.url()).pathname}: ${text}`)
  page.on('pageerror', (error) => note(error.message))
  page.on('console', (message) => {
    // Chromium prints every refused request too; those are noted with their status below.
    if (message.type() === 'error' && !message.text().startsWith('Failed to load resource'))
      note(message.text())
    if (message.type() === 'warning' && message.text().startsWith('[Vue')) note(message.text())
  })
  page.on('requestfailed', (request) => {
    const why = request.failure()?.errorText ?? 'no reason'
    if (why !== 'net::ERR_ABORTED') note(`${request.method()} ${request.url()} failed: ${why}`)
  })
  page.on('response', (response) => {
    if (response.status() < 400) return
    const at = expected.indexOf(response.status())
    if (at >= 0) expected.splice(at, 1)
    else note(`${response.request().method()} ${response.url()} answered ${response.status()}`)
  })
  return { list, expectStatus: (status) => expected.push(status) }
}

/** Prints what the page shows should the running test fail. */
export function showOnFailure(page: Page): void {
  onTestFailed(async () => {
    if (page.isClosed()) return
    const shown = await page
      .locator('body')
      .ariaSnapshot({ timeout: 2000 })
      .catch(() => 'nothing readable')
    console.error(`The page ${page.url()} showed:\n${shown}`)
  })
}

/** Waits until the page shows its heading and nothing on it is being loaded or worked out. */
export async function settled(page: Page): Promise<void> {
  await page.getByRole('heading', { level: 1 }).first().waitFor({ state: 'attached' })
  await expect.poll(() => page.getByRole('main').getByRole('progressbar').count(), waiting).toBe(0)
}

/** How long something on a page may take on a busy machine. */
export const waiting = { timeout: 15_000, interval: 50 }

/** Picks one of the choices of a select. */
export async function choose(page: Page, label: string, choice: string | RegExp): Promise<void> {
  // The input lies under the field that shows the chosen value, so the field is what a pointer meets.
  await selectOf(page, label).click()
  await page.getByRole('option', { name: choice, exact: typeof choice === 'string' }).click()
}

/** The field of a select or of a list that is typed in. */
export const selectOf = (page: Page, label: string): Locator =>
  page.getByRole('combobox').filter({ has: page.getByRole('combobox', { name: label, exact: true }) })

/** Signs in on the sign-in page and waits for the page behind it. */
export async function signIn(page: Page, origin: string, email: string, password: string): Promise<void> {
  await page.goto(`${origin}/sign-in`)
  await page.getByLabel('E-mail address').fill(email)
  await page.getByLabel('Password', { exact: true }).fill(password)
  await page.getByRole('main').getByRole('button', { name: 'Sign in', exact: true }).click()
  await page.waitForURL(/\/farms\//)
}

/** Signs in without the page, as somebody of the demo's first farm. @returns the farm's id */
export async function signInAs(page: Page, { origin, signIns }: Application, role: string): Promise<string> {
  const farm = signIns[0]?.farm
  const who = signIns.find((one) => one.role === role && one.farm === farm)
  if (!who) throw new Error(`the demo has no ${role}`)
  await page.context().clearCookies()
  const answer = await page.request.post(`${origin}/api/v1/auth/sign-in`, {
    data: { email: who.email, password: who.password },
  })
  if (!answer.ok()) throw new Error(`sign-in answered ${answer.status()}`)
  const session = (await answer.json()) as Session
  const id = session.memberships.find((one) => one.farm.name === farm)?.farm.id
  if (!id) throw new Error(`${who.name} is not a member of ${farm}`)
  return id
}

/** What an address of the API gives to whoever is signed in on the page. */
export async function fetched<T>(page: Page, path: string): Promise<T> {
  const answer = await page.request.get(new URL(`/api/v1${path}`, page.url()).href)
  if (!answer.ok()) throw new Error(`GET ${path} answered ${answer.status()}: ${await answer.text()}`)
  return (await answer.json()) as T
}

/** The saved mix of the page, solved by the API apart from the page. */
export async function solvedApart(page: Page): Promise<SolveResponse> {
  const [, farm, mix] = /\/farms\/([^/]+)\/mixes\/([^/?]+)/.exec(page.url()) ?? []
  const { name, groupId, basis, batchDryMatterKg, pricesAsOf, feeds, limits } = await fetched<MixDraft>(
    page,
    `/farms/${farm}/mixes/${mix}`,
  )
  const draft = { name, groupId, basis, batchDryMatterKg, pricesAsOf, feeds, limits }
  const answer = await page.request.post(new URL(`/api/v1/farms/${farm}/solve`, page.url()).href, {
    data: { draft },
  })
  if (!answer.ok()) throw new Error(`solve answered ${answer.status()}: ${await answer.text()}`)
  return (await answer.json()) as SolveResponse
}

/** Cost and mix of a bench or of a stored revision, beside the sack. */
export const headline = (page: Page): Locator =>
  page.getByRole('complementary', { name: 'a head and day', exact: true })

/** The cost a head and day as it stands on the page, such as `$0.181`; waits until an answer is there. */
export async function costShown(page: Page): Promise<string> {
  await settled(page)
  const text =
    (await headline(page).getByText('a head and day', { exact: true }).locator('..').textContent()) ?? ''
  const [figure] = /\$[\d.,]+/.exec(text) ?? []
  if (!figure) throw new Error(`no cost in "${text}"`)
  return figure
}

export const amountOf = (money: string): number => Number(money.replace(/[$,]/g, ''))

/** An amount to as many places as a shown one has. */
export const likeShown = (amount: number, shown: string): string =>
  `$${amount.toFixed(shown.split('.')[1]?.length ?? 0)}`

import type {
  Feed,
  FirstMix,
  Group,
  GroupCreate,
  Mix,
  MixDraft,
  Scenario,
  Role,
  SolveResponse,
  Supplier,
} from '@maslin/shared'
import { loadBookFeeds } from '../../backend/src/services/bookFeeds'
import { SolvingPool } from '../../backend/src/solving/pool'
import { startTestApp, type TestApp, type TestAppOptions, type Visitor } from './app'
import { signUp, type Person } from './people'

/** Prices per 50 lb bag, USD: invented. */
const bagPrices: Record<string, string> = {
  'timothy-hay-early-bloom': '6.50',
  'alfalfa-hay-early-bloom': '8.20',
  'barley-grain': '11.40',
  'corn-grain': '9.80',
  'oats-grain': '12.10',
  'beet-pulp-dried': '14.75',
  'soybean-hulls': '9.95',
  'soybean-meal-44': '17.40',
  limestone: '6.10',
  salt: '7.60',
  'sheep-mineral': '28.50',
}

export interface TestFarm {
  test: TestApp
  pool: SolvingPool
  owner: Visitor
  farmId: string
  /** Address of the farm's resources. */
  at: string
  /** Feeds of the farm by their keys in the book. */
  feeds: ReadonlyMap<string, Feed>
  feed: (bookKey: string) => Feed
  close: () => Promise<void>
}

/** A farm with the feeds of a first mix and a price for each, over an API whose workers really solve. */
export async function startTestFarm(options: TestAppOptions = {}): Promise<TestFarm> {
  const pool = await SolvingPool.create({ workers: 1, queueLimit: 50 })
  return furnishFarm(await startTestApp({ solving: pool, ...options }), pool)
}

/** The same on an API that is there already. */
export async function furnishFarm(test: TestApp, pool: SolvingPool): Promise<TestFarm> {
  await loadBookFeeds(test.database, test.config.libraryDirectory)
  const { visitor: owner, farmId } = await signUp(test, 'Odell Marsh')
  const at = `/api/v1/farms/${farmId}`
  const copied = await owner.post(`${at}/feeds/copies`).send({ bookKeys: Object.keys(bagPrices) })
  const feeds = new Map(bodyOf<{ items: Feed[] }>(copied).items.map((feed) => [feed.bookKey ?? '', feed]))
  const supplier = bodyOf<Supplier>(await owner.post(`${at}/suppliers`).send({ name: 'Fell Foot Stores' }))
  for (const [key, price] of Object.entries(bagPrices)) {
    const offer = {
      supplierId: supplier.id,
      feedId: feeds.get(key)?.id,
      packageQuantity: 50,
      packageUnit: 'lb',
      price,
      date: '2026-06-01',
    }
    bodyOf(await owner.post(`${at}/offers`).send(offer))
  }
  return {
    test,
    pool,
    owner,
    farmId,
    at,
    feeds,
    feed: (bookKey) => {
      const feed = feeds.get(bookKey)
      if (!feed) throw new Error(`the test farm does not keep ${bookKey}`)
      return feed
    },
    close: async () => {
      await pool.close()
      await test.close()
    },
  }
}

/** The answer's body where the status is the expected one; else a failure that shows what was answered. */
export function bodyOf<T>(answer: { status: number; body: unknown }, status = 201): T {
  if (answer.status !== status) throw new Error(`answered ${answer.status}: ${JSON.stringify(answer.body)}`)
  return answer.body as T
}

/** Somebody new who holds a role on the farm. */
export async function addMember({ test, owner, at }: TestFarm, role: Role): Promise<Person> {
  const person = await signUp(test, `Some ${role}`)
  bodyOf(await owner.post(`${at}/members`).send({ email: person.email, role }))
  return person
}

/** Ewes with one lamb, four weeks before lambing, on free-choice hay. */
export const ewes = (farm: TestFarm, changes: Partial<GroupCreate> = {}): GroupCreate => ({
  name: 'Ewes with one lamb',
  heads: 40,
  animal: { species: 'sheep', class: 'ewe', stage: 'latePregnancy', bodyWeightKg: 70, litter: 1 },
  baseDiet: [{ feedId: farm.feed('timothy-hay-early-bloom').id, mode: 'freeChoice', wasteShare: 0.1 }],
  ...changes,
})

export async function addGroup(farm: TestFarm, group: GroupCreate = ewes(farm)): Promise<Group> {
  return bodyOf<Group>(await farm.owner.post(`${farm.at}/groups`).send(group))
}

/** The first mix proposed for a group, with prices as of a day after the first ones. */
export async function firstDraft(farm: TestFarm, group: Group, basis?: MixDraft['basis']): Promise<MixDraft> {
  const answer = await farm.owner.get(`${farm.at}/groups/${group.id}/first-mix`).query(basis ? { basis } : {})
  return { ...bodyOf<FirstMix>(answer, 200).draft, pricesAsOf: '2026-06-30' }
}

export async function solve(farm: TestFarm, draft: MixDraft, more: object = {}): Promise<SolveResponse> {
  return (
    await farm.owner
      .post(`${farm.at}/solve`)
      .send({ draft, ...more })
      .expect(200)
  ).body as SolveResponse
}

export async function saveScenario(farm: TestFarm, draft: MixDraft, name = 'Winter'): Promise<Scenario> {
  return bodyOf<Scenario>(await farm.owner.post(`${farm.at}/scenarios`).send({ name, draft }))
}

/** A saved mix as the bench takes it. */
export const draftOf = ({ id: _id, version: _version, updatedAt: _updatedAt, ...draft }: Mix): MixDraft =>
  draft

/** The header that says which version is changed. */
export const ifMatch = ({ version }: { version: number }) => ({ 'If-Match': `"${version}"` })

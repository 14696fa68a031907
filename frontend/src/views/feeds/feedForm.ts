import { type Feed, type FeedClass, type FeedUpdate } from '@maslin/shared'

/** What can be typed about a feed besides its composition. */
export interface FeedFacts {
  name: string
  class: FeedClass
  dryMatter: number | undefined
  dryMatterSource: string
  forage: boolean
  testWeightKg: number | undefined
  bulkDensityKgPerL: number | undefined
  ruminantOrigin: Feed['ruminantOrigin']
  nonProteinNitrogen: number | undefined
  addedCopper: boolean
  ionophore: boolean
  note: string
}

export function newFacts(): FeedFacts {
  return {
    name: '',
    class: 'dryForage',
    dryMatter: undefined,
    dryMatterSource: '',
    forage: true,
    testWeightKg: undefined,
    bulkDensityKgPerL: undefined,
    ruminantOrigin: 'no',
    nonProteinNitrogen: 0,
    addedCopper: false,
    ionophore: false,
    note: '',
  }
}

export function factsOf(feed: Feed): FeedFacts {
  return {
    name: feed.name,
    class: feed.class,
    dryMatter: feed.dryMatter,
    dryMatterSource: feed.dryMatterSource,
    forage: feed.forage,
    testWeightKg: feed.testWeightKg,
    bulkDensityKgPerL: feed.bulkDensityKgPerL,
    ruminantOrigin: feed.ruminantOrigin,
    nonProteinNitrogen: feed.nonProteinNitrogen,
    addedCopper: feed.addedCopper,
    ionophore: feed.ionophore,
    note: feed.note ?? '',
  }
}

/** The facts as the API takes them, or undefined while a needed one is missing. */
export function readyFacts(facts: FeedFacts) {
  if (!facts.name.trim() || facts.dryMatter === undefined) return undefined
  const { testWeightKg, bulkDensityKgPerL, note, dryMatter, ...rest } = facts
  return {
    ...rest,
    dryMatter,
    nonProteinNitrogen: facts.nonProteinNitrogen ?? 0,
    note: note.trim(),
    ...(testWeightKg === undefined ? {} : { testWeightKg }),
    ...(bulkDensityKgPerL === undefined ? {} : { bulkDensityKgPerL }),
  }
}

/** Only what differs, so that a change elsewhere in the feed is no clash. A dry matter typed here is no longer the book's. */
export function changedFacts(before: Feed, facts: FeedFacts): FeedUpdate | undefined {
  const ready = readyFacts(facts)
  if (!ready) return undefined
  const old: Record<string, unknown> = { ...factsOf(before) }
  const entries = Object.entries(ready).filter(([name, value]) => value !== old[name])
  const update: FeedUpdate = Object.fromEntries(entries)
  return update.dryMatter === undefined ? update : { ...update, dryMatterStatus: 'typed' }
}

import { feedCreateSchema, groupCreateSchema, offerCreateSchema } from '@maslin/shared'
import { copyBookFeeds } from '../services/bookFeeds'
import { createFeed } from '../services/feeds'
import { createGroup } from '../services/groups'
import { createOffer } from '../services/offers'
import { createSupplier } from '../services/suppliers'
import type { DemoSite } from './loadDemo'

/** Gives a demo farm its people, feeds, suppliers, offers with their prices over time, and groups. */
export async function stockFarm(site: DemoSite): Promise<void> {
  await addMembers(site)
  await addFeeds(site)
  await addPrices(site)
  await addGroups(site)
}

async function addMembers({ farm, farmId, people, as }: DemoSite): Promise<void> {
  const owner = as(ownerOf(farm))
  for (const { ref, role } of farm.members) {
    await owner.members.insert({ userId: people.get(ref)?.id ?? '', role })
  }
  await owner.audit.record({ action: 'create', entity: 'farm', entityId: farmId, after: { name: farm.name } })
}

async function addFeeds({ farm, as, feedIds }: DemoSite): Promise<void> {
  const owner = as(ownerOf(farm))
  const { items } = await copyBookFeeds(owner, farm.bookFeeds)
  for (const { id, bookKey } of items) if (bookKey) feedIds.set(bookKey, id)
  for (const { ref, values, source, status, ...rest } of farm.ownFeeds) {
    const known = Object.entries(values).map(([nutrient, value]) => [nutrient, { value, source, status }])
    const fields = {
      ...rest,
      dryMatterSource: source,
      dryMatterStatus: status,
      values: Object.fromEntries(known) as unknown,
    }
    feedIds.set(ref, (await createFeed(owner, feedCreateSchema.parse(fields))).id)
  }
}

async function addPrices({ farm, as, feedIds }: DemoSite): Promise<void> {
  const owner = as(ownerOf(farm))
  const supplierIds = new Map<string, string>()
  for (const supplier of farm.suppliers) {
    supplierIds.set(supplier.name, (await createSupplier(owner, supplier)).id)
  }
  for (const { supplier, feed, prices, ...rest } of farm.offers) {
    const fields = { ...rest, supplierId: supplierIds.get(supplier), feedId: feedIds.get(feed) }
    const { id: offerId } = await createOffer(owner, offerCreateSchema.parse(fields))
    await owner.prices.insertMany(
      prices.map((price) => ({ ...price, offerId, source: 'demo' as const, importId: null })),
    )
    await owner.audit.record({ action: 'load_demo', entity: 'offer', entityId: offerId, after: { prices } })
  }
}

async function addGroups({ farm, requirements, as, feedIds, groupIds }: DemoSite): Promise<void> {
  const owner = as(ownerOf(farm))
  for (const { baseDiet, ...rest } of farm.groups) {
    const items = baseDiet.map(({ feed, ...item }) => ({ ...item, feedId: feedIds.get(feed) }))
    const group = await createGroup(
      owner,
      requirements,
      groupCreateSchema.parse({ ...rest, baseDiet: items }),
    )
    groupIds.set(rest.name, group.id)
  }
}

export function ownerOf(farm: DemoSite['farm']): string {
  const owner = farm.members.find(({ role }) => role === 'owner')
  if (!owner) throw new Error(`the demo farm ${farm.name} has no owner`)
  return owner.ref
}

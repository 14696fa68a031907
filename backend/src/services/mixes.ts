import { limitSchema, type Limit, type Mix, type MixDraft, type MixSummary } from '@maslin/shared'
import { z } from 'zod'
import type { FarmRepositories } from '../repositories/inFarm'
import type { MixFeedRow, MixRow } from '../repositories/mixes'
import { checkDraft } from './mixDraft'
import { plainDecimal } from './offers'

/** Shape in which limits are stored, and the way from each shape ever stored to today's. */
const LIMITS_VERSION = 1
const limitReaders: Record<number, (stored: unknown) => Limit[]> = {
  1: (stored) => z.array(limitSchema).parse(stored),
}

/** Mixes last changed first, without their limits. */
export async function listMixes(farm: FarmRepositories): Promise<MixSummary[]> {
  const rows = await farm.mixes.list(
    {},
    {
      columns: ['id', 'name', 'groupId', 'basis', 'feedCount', 'limitCount', 'version', 'updatedAt'],
      orderBy: [
        ['updatedAt', 'DESC'],
        ['id', 'DESC'],
      ],
    },
  )
  const groups = await farm.groups.list(
    { id: rows.map(({ groupId }) => groupId) },
    { columns: ['id', 'name'] },
  )
  const names = new Map(groups.map(({ id, name }) => [id, name]))
  return rows.map((row) => ({
    id: row.id,
    name: row.name,
    groupId: row.groupId,
    groupName: names.get(row.groupId) ?? '',
    basis: row.basis,
    feedCount: row.feedCount,
    limitCount: row.limitCount,
    version: row.version,
    updatedAt: row.updatedAt.toISOString(),
  }))
}

/** Throws AppError `not_found`. */
export async function getMix(farm: FarmRepositories, id: string): Promise<Mix> {
  const row = await farm.mixes.get(id)
  const feeds = await farm.mixFeeds.list({ mixId: id }, { orderBy: [['position', 'ASC']] })
  return toMix(row, feeds)
}

/** Throws AppError `invalid_input` where the draft names what the farm does not have. */
export async function createMix(farm: FarmRepositories, draft: MixDraft): Promise<Mix> {
  await checkDraft(farm, draft, { toSave: true })
  const row = await farm.mixes.insert(mixColumns(draft))
  await writeFeeds(farm, row.id, draft)
  const mix = await getMix(farm, row.id)
  await farm.audit.record({ action: 'create', entity: 'mix', entityId: row.id, after: mix })
  return mix
}

/** Puts the draft in place of the mix as it was. Throws AppError `stale_version`, `not_found`, `invalid_input`. */
export async function replaceMix(
  farm: FarmRepositories,
  id: string,
  version: number,
  draft: MixDraft,
): Promise<Mix> {
  const before = await getMix(farm, id)
  await checkDraft(farm, draft, { toSave: true })
  await farm.mixes.update(id, version, mixColumns(draft))
  await writeFeeds(farm, id, draft)
  const after = await getMix(farm, id)
  await farm.audit.record({ action: 'update', entity: 'mix', entityId: id, before, after })
  return after
}

/** Scenarios saved from the mix stay; they only no longer name it. Throws AppError `stale_version`, `not_found`. */
export async function deleteMix(farm: FarmRepositories, id: string, version: number): Promise<void> {
  const before = await getMix(farm, id)
  const scenarios = await farm.scenarios.list({ mixId: id }, { columns: ['id'] })
  for (const scenario of scenarios) await farm.scenarios.overwrite(scenario.id, { mixId: null })
  await farm.mixes.remove(id, version)
  const namedBy = scenarios.map((scenario) => scenario.id)
  await farm.audit.record({ action: 'delete', entity: 'mix', entityId: id, before: { ...before, namedBy } })
}

const mixColumns = (draft: MixDraft) => ({
  groupId: draft.groupId,
  name: draft.name,
  basis: draft.basis,
  batchDryMatterKg: draft.batchDryMatterKg,
  pricesAsOf: draft.pricesAsOf ?? null,
  limitsVersion: LIMITS_VERSION,
  limits: JSON.stringify(draft.limits),
  feedCount: draft.feeds.length,
  limitCount: draft.limits.length,
  note: draft.note || null,
})

async function writeFeeds(farm: FarmRepositories, mixId: string, draft: MixDraft): Promise<void> {
  const rows = draft.feeds.map((feed, position) => ({
    mixId,
    position,
    feedId: feed.feedId,
    offerId: feed.offerId ?? null,
    pricePerKg: feed.pricePerKg ?? null,
  }))
  await farm.mixFeeds.replace({ mixId }, rows)
}

function toMix(row: MixRow, feeds: readonly MixFeedRow[]): Mix {
  const readLimits = limitReaders[row.limitsVersion]
  if (!readLimits) throw new Error(`limits of version ${row.limitsVersion} are not known`)
  return {
    id: row.id,
    name: row.name,
    groupId: row.groupId,
    basis: row.basis,
    batchDryMatterKg: row.batchDryMatterKg,
    ...(row.pricesAsOf === null ? {} : { pricesAsOf: row.pricesAsOf }),
    feeds: feeds.map(({ feedId, offerId, pricePerKg }) => ({
      feedId,
      ...(offerId === null ? {} : { offerId }),
      ...(pricePerKg === null ? {} : { pricePerKg: plainDecimal(pricePerKg) }),
    })),
    limits: readLimits(JSON.parse(row.limits)),
    ...(row.note === null ? {} : { note: row.note }),
    version: row.version,
    updatedAt: row.updatedAt.toISOString(),
  }
}

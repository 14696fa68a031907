import type { Feed, FormulationInput, MixDraft } from '@maslin/shared'
import { AppError } from '../errors'
import type { FarmRepositories } from '../repositories/inFarm'
import { toFeed } from './feeds'
import { buildFormulationInput, type SolverPrice } from './formulationInput'
import { getGroup } from './groups'
import { checkDraft } from './mixDraft'
import { pricesAsOf, type PricedOffer } from './offers'
import { stageOf, type RequirementLibrary } from './requirementLibrary'

/**
 * Reads everything a draft rests on from the farm's rows: group with its requirement, feeds, prices as of the day.
 * @param within prefix of the paths in problems (`draft.`)
 * Throws AppError `invalid_input` where the draft names what the farm does not have.
 */
export async function gatherInput(
  farm: FarmRepositories,
  library: RequirementLibrary,
  draft: MixDraft,
  within = '',
): Promise<FormulationInput> {
  await checkDraft(farm, draft, { within })
  const group = await getGroup(farm, library, draft.groupId)
  const stage = stageOf(library, group.animal)
  if (!stage)
    throw new AppError('invalid_input', {
      errors: [
        {
          path: `${within}groupId`,
          code: 'unknown_stage',
          message: 'The tables no longer know the stage of this group; choose it anew.',
        },
      ],
    })
  const ids = new Set([...draft.feeds, ...group.baseDiet].map(({ feedId }) => feedId))
  const day = draft.pricesAsOf ?? farm.today
  const offers = await pricesAsOf(farm, day)
  const { currency } = await farm.account.get()
  return buildFormulationInput({
    draft,
    currency,
    pricesAsOf: day,
    group,
    stage,
    feeds: await readFeeds(farm, [...ids]),
    priceOfOffer: new Map([...offers.values()].flat().map((offer) => [offer.offerId, solverPrice(offer)])),
    cheapest: new Map(
      [...offers].flatMap(([feedId, [first]]) => (first ? [[feedId, solverPrice(first)] as const] : [])),
    ),
    assumedHighs: library.assumedHighs,
    defaults: library.defaults,
  })
}

/** Feeds of the farm with their values, by id. Ids of other farms find nothing. */
export async function readFeeds(farm: FarmRepositories, ids: readonly string[]): Promise<Map<string, Feed>> {
  const rows = await farm.feeds.list({ id: ids })
  const values = await farm.feedValues.byFeed(ids)
  return new Map(rows.map((row) => [row.id, toFeed(row, values.get(row.id))]))
}

function solverPrice(offer: PricedOffer): SolverPrice {
  const { supplierName, packageQuantity, packageUnit, packageKg, price, date } = offer
  return {
    pricePerKg: Number(offer.perKgAsFed),
    priceOrigin: { supplierName, packageQuantity, packageUnit, packageKg, price, date },
  }
}

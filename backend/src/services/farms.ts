import type { Farm, FarmUpdate } from '@maslin/shared'
import { AppError } from '../errors'
import type { FarmRepositories } from '../repositories/inFarm'
import { toFarm } from './accounts'
import { withoutAbsent } from './changes'

export async function getFarm(farm: FarmRepositories): Promise<Farm> {
  return toFarm(await farm.account.get())
}

/** @throws AppError `wrong_state` for another currency while there are prices or costs: those keep the one they were given in */
export async function updateFarm(
  farm: FarmRepositories,
  version: number,
  changes: FarmUpdate,
): Promise<Farm> {
  const before = toFarm(await farm.account.get({ forUpdate: true }))
  const otherCurrency = changes.currency !== undefined && changes.currency !== before.currency
  if (otherCurrency && before.version === version && (await hasAmounts(farm))) {
    const message = `The farm has prices or costs in ${before.currency}; the currency cannot change any more.`
    throw new AppError('wrong_state', {
      detail: message,
      errors: [{ path: 'currency', code: 'has_prices', message }],
    })
  }
  const after = toFarm(await farm.account.update(version, withoutAbsent(changes)))
  await farm.audit.record({ action: 'update', entity: 'farm', entityId: farm.farmId, before, after })
  return after
}

/** Amounts stand in offers' prices, in prices tried out in a mix, and in the costs of scenarios. */
async function hasAmounts(farm: FarmRepositories): Promise<boolean> {
  if ((await farm.prices.count()) > 0 || (await farm.scenarios.count()) > 0) return true
  const tried = await farm.mixFeeds.list({}, { columns: ['pricePerKg'] })
  return tried.some(({ pricePerKg }) => pricePerKg !== null)
}

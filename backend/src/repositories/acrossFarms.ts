import type { Role } from '@maslin/shared'
import type { Transaction } from 'sequelize'
import type { Database } from '../database/database'
import { plain } from './farmTable'
import type { FarmAccountRow, MembershipRow } from './farms'

/**
 * What one person may reach over all their farms. Every farm in the answer is one they are a member of now; whatever is
 * read of a farm afterwards goes through `inFarm` with its id.
 */
export function acrossFarms(database: Database, userId: string, transaction: Transaction | null = null) {
  const { models } = database
  return {
    async memberships(filter: { role?: Role } = {}): Promise<{ farm: FarmAccountRow; role: Role }[]> {
      const memberships = (
        await models.memberships.findAll({
          where: { userId, ...filter },
          transaction,
          order: [['id', 'ASC']],
        })
      ).map(plain<MembershipRow>)
      const farms = (
        await models.farms.findAll({ where: { id: memberships.map((it) => it.farmId) }, transaction })
      ).map(plain<FarmAccountRow>)
      const byId = new Map(farms.map((farm) => [farm.id, farm]))
      return memberships.flatMap(({ farmId, role }) => {
        const farm = byId.get(farmId)
        return farm ? [{ farm, role }] : []
      })
    },
  }
}

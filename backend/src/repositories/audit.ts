import type { Transaction } from 'sequelize'
import { v7 as uuidv7 } from 'uuid'
import type { Models } from '../models'

export interface AuditEntry {
  /** `create`, `update`, `delete`, or what the trade calls it: `submit`, `approve`, `import`. */
  action: string
  /** The kind of thing, in the singular: `feed`, `offer`, `scenario`. */
  entity: string
  entityId: string
  before?: unknown
  after?: unknown
}

export interface Actor {
  userId: string | null
  requestId: string
  /** The day it is where the person sits, `YYYY-MM-DD`; left out: the day in UTC. */
  day?: string | undefined
}

/** What happened on a farm: written with the change itself, in its transaction, and never changed afterwards. */
export class AuditTrail {
  constructor(
    private readonly models: Models,
    private readonly farmId: string,
    private readonly transaction: Transaction,
    private readonly actor: Actor,
    private readonly now: Date,
  ) {}

  async record({ action, entity, entityId, before, after }: AuditEntry): Promise<void> {
    await this.models.auditEvents.create(
      {
        id: uuidv7(),
        farmId: this.farmId,
        userId: this.actor.userId,
        action,
        entity,
        entityId,
        beforeState: before ?? null,
        afterState: after ?? null,
        requestId: this.actor.requestId,
        createdAt: this.now,
      },
      { transaction: this.transaction },
    )
  }
}

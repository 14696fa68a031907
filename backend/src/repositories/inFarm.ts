import type { Transaction } from 'sequelize'
import type { Database } from '../database/database'
import { AuditTrail, type Actor } from './audit'
import { bookFeeds } from './bookFeeds'
import { FarmAccount } from './farms'
import { FarmTable } from './farmTable'
import { FeedValueTable } from './feeds'
import { PartTable } from './partTable'
import { People } from './people'
import { OfferPrices } from './prices'

/**
 * Everything a use case may reach of one farm, inside its transaction. This is the only way to a farm's rows: each
 * repository made here puts the farm's id into every statement. A new table gets one line here.
 */
export function inFarm(database: Database, farmId: string, transaction: Transaction, actor: Actor) {
  const { models } = database
  /** One moment for everything a use case writes. */
  const now = new Date()
  const parts = [farmId, transaction, now] as const
  return {
    farmId,
    userId: actor.userId,
    now,
    /** The actor's calendar day: a price of their today holds for them, whatever day it is at the server. */
    today: actor.day ?? now.toISOString().slice(0, 10),
    account: new FarmAccount(models, ...parts),
    members: new FarmTable(models.memberships, ...parts),
    people: new People(models, transaction),
    book: bookFeeds(database, transaction),
    feeds: new FarmTable(models.feeds, ...parts),
    feedValues: new FeedValueTable(models.feedValues, farmId, transaction),
    suppliers: new FarmTable(models.suppliers, ...parts),
    offers: new FarmTable(models.offers, ...parts),
    prices: new FarmTable(models.prices, ...parts),
    offerPrices: new OfferPrices(database.sequelize, farmId, transaction),
    priceImports: new FarmTable(models.priceImports, ...parts),
    groups: new FarmTable(models.groups, ...parts),
    baseDietItems: new PartTable(models.baseDietItems, ...parts),
    needOverrides: new PartTable(models.needOverrides, ...parts),
    mixes: new FarmTable(models.mixes, ...parts),
    mixFeeds: new PartTable(models.mixFeeds, ...parts),
    scenarios: new FarmTable(models.scenarios, ...parts),
    scenarioRevisions: new PartTable(models.scenarioRevisions, ...parts),
    comments: new FarmTable(models.comments, ...parts),
    reviews: new FarmTable(models.reviews, ...parts),
    audit: new AuditTrail(models, farmId, transaction, actor, now),
  }
}

export type FarmRepositories = ReturnType<typeof inFarm>

import type { Sequelize } from 'sequelize'
import {
  defineAuditEvents,
  defineFarms,
  defineMemberships,
  defineRefreshTokens,
  defineSessions,
  defineUsers,
} from './accounts'
import { defineBookFeeds, defineBookLoads } from './bookFeeds'
import { defineFeeds, defineFeedValues } from './feeds'
import { defineBaseDietItems, defineBookTables, defineGroups, defineNeedOverrides } from './groups'
import { defineMixes, defineMixFeeds } from './mixes'
import { defineOffers, definePriceImports, definePrices, defineSuppliers } from './prices'
import { defineComments, defineReviews, defineScenarioRevisions, defineScenarios } from './scenarios'

/** Every table, listed explicitly. Repositories alone may import from here. */
export function defineModels(sequelize: Sequelize) {
  return {
    users: defineUsers(sequelize),
    sessions: defineSessions(sequelize),
    refreshTokens: defineRefreshTokens(sequelize),
    farms: defineFarms(sequelize),
    memberships: defineMemberships(sequelize),
    auditEvents: defineAuditEvents(sequelize),
    bookFeeds: defineBookFeeds(sequelize),
    bookLoads: defineBookLoads(sequelize),
    feeds: defineFeeds(sequelize),
    feedValues: defineFeedValues(sequelize),
    suppliers: defineSuppliers(sequelize),
    offers: defineOffers(sequelize),
    prices: definePrices(sequelize),
    priceImports: definePriceImports(sequelize),
    bookTables: defineBookTables(sequelize),
    groups: defineGroups(sequelize),
    baseDietItems: defineBaseDietItems(sequelize),
    needOverrides: defineNeedOverrides(sequelize),
    mixes: defineMixes(sequelize),
    mixFeeds: defineMixFeeds(sequelize),
    scenarios: defineScenarios(sequelize),
    scenarioRevisions: defineScenarioRevisions(sequelize),
    comments: defineComments(sequelize),
    reviews: defineReviews(sequelize),
  }
}

export type Models = ReturnType<typeof defineModels>

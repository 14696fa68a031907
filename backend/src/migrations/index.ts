import type { Migration } from '../database/migrate'
import { accounts } from './0001-accounts'
import { book } from './0002-book'
import { feeds } from './0003-feeds'
import { prices } from './0004-prices'
import { groups } from './0005-groups'
import { mixes } from './0006-mixes'
import { scenarios } from './0007-scenarios'

/** Every step of the schema, in order. A released step is never changed; a change is a new step. */
export const migrations: readonly Migration[] = [accounts, book, feeds, prices, groups, mixes, scenarios]

import { accountRoutes } from './accounts'
import { bookFeedRoutes } from './bookFeeds'
import { farmRoutes } from './farms'
import { feedRoutes } from './feeds'
import { groupRoutes } from './groups'
import { healthRoutes } from './health'
import { memberRoutes } from './members'
import { mixRoutes } from './mixes'
import { offerRoutes } from './offers'
import { priceImportRoutes } from './priceImports'
import { reviewRoutes } from './reviews'
import type { Route } from './route'
import { scenarioRoutes } from './scenarios'
import { solveRoutes } from './solve'
import { supplierRoutes } from './suppliers'

/** Every route of the API, one file per resource. */
export const routes: readonly Route[] = [
  ...healthRoutes,
  ...accountRoutes,
  ...farmRoutes,
  ...memberRoutes,
  ...bookFeedRoutes,
  ...feedRoutes,
  ...supplierRoutes,
  ...offerRoutes,
  ...priceImportRoutes,
  ...groupRoutes,
  ...mixRoutes,
  ...solveRoutes,
  ...scenarioRoutes,
  ...reviewRoutes,
]

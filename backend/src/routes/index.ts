import { feedRoutes } from './feeds'
import { groupRoutes } from './groups'
import { healthRoutes } from './health'
import { mixRoutes } from './mixes'
import { reviewRoutes } from './reviews'
import type { Route } from './route'
import { scenarioRoutes } from './scenarios'
import { solveRoutes } from './solve'

/** Every route of the API, one file per resource. */
export const routes: readonly Route[] = [
  ...healthRoutes,
  ...feedRoutes,
  ...groupRoutes,
  ...mixRoutes,
  ...solveRoutes,
  ...scenarioRoutes,
  ...reviewRoutes,
]

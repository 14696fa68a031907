import { feedRoutes } from './feeds'
import { healthRoutes } from './health'
import type { Route } from './route'

/** Every route of the API, one file per resource. */
export const routes: readonly Route[] = [...healthRoutes, ...feedRoutes]

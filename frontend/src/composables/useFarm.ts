import type { Action, Farm, Role } from '@maslin/shared'
import { computed, type ComputedRef } from 'vue'
import { useSessionStore } from '../stores/session'

export interface FarmContext {
  readonly farm: ComputedRef<Farm>
  readonly farmId: ComputedRef<string>
  readonly role: ComputedRef<Role>
  /** Whether the signed-in person may do this on the farm on the page. */
  readonly can: (action: Action) => boolean
}

/**
 * The farm on the page. For components under `/farms/:farmId`, where the router has already made sure that there is one.
 * After signing out the last farm stays readable until the page is gone.
 * @throws {Error} outside such a page
 */
export function useFarm(): FarmContext {
  const session = useSessionStore()
  let last = session.membership
  if (!last) throw new Error('useFarm is for pages of a farm')
  const membership = computed(() => (last = session.membership ?? last)!)
  return {
    farm: computed(() => membership.value.farm),
    farmId: computed(() => membership.value.farm.id),
    role: computed(() => membership.value.role),
    can: session.can,
  }
}

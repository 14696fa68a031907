import { QueryClient } from '@tanstack/vue-query'
import { ApiError } from './api/client'

/** Server state. A refusal is final; a server that does not answer is asked again, twice. */
export const queryClient = new QueryClient({
  defaultOptions: {
    queries: {
      staleTime: 15_000,
      refetchOnWindowFocus: true,
      retry: (count, error) => count < 2 && error instanceof ApiError && error.isPassing,
    },
  },
})

/** Key of something that belongs to a farm; a change to `feeds` invalidates every key that begins with it. */
export function farmKey(farmId: string, ...rest: readonly unknown[]): readonly unknown[] {
  return ['farms', farmId, ...rest]
}

import type { LocationQuery } from 'vue-router'

/** Where to go on after signing in. Only a path of this site: a link must not lead elsewhere. */
export function nextPath(query: LocationQuery): string | undefined {
  const next = query['next']
  return typeof next === 'string' && /^\/(?![/\\])/.test(next) ? next : undefined
}

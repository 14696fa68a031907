import type { SolveResponse } from '@maslin/shared'
import type { Words } from './words'

/** What an answer says in one sentence, for people who listen to the page. */
export function solveAnnouncement({ answer }: SolveResponse, { t, q }: Words): string {
  if (answer.status === 'infeasible') return t('mixes.bench.announceNone')
  if (answer.status !== 'optimal') return t(`mixes.failed.${answer.status}`)
  return t('mixes.bench.announce', { cost: q.money(answer.cost.perHeadDay) })
}

import type { MixDraft, Scenario } from '@maslin/shared'
import { firstMix } from '../services/firstMix'
import { createMix } from '../services/mixes'
import { reviewRevision, submitRevision } from '../services/reviews'
import { createRevision, createScenario, getRevision, type Person } from '../services/scenarios'
import type { SolveContext } from '../services/solve'
import type { DemoMix } from './demoFiles'
import type { DemoSite } from './loadDemo'
import { ownerOf } from './stockFarm'

type Step = NonNullable<DemoMix['scenario']>['revisions'][number]

/** Saves the first mix of a group, and takes its scenario through what its people did, each step really solved. */
export async function workOnMix(site: DemoSite, { group, name, scenario: story }: DemoMix): Promise<void> {
  const groupId = site.groupIds.get(group)
  if (!groupId) throw new Error(`the demo has no group ${group}`)
  const owner = site.as(ownerOf(site.farm))
  const { draft: proposed } = await firstMix(owner, site.requirements, groupId)
  const draft = { ...proposed, name }
  const mix = await createMix(owner, draft)
  let scenario: Scenario | undefined
  for (const step of story?.revisions ?? []) {
    scenario = await save(site, step, { ...draft, pricesAsOf: step.pricesAsOf }, scenario, {
      name: story?.name ?? name,
      mixId: mix.id,
    })
    scenario = await handIn(site, step, scenario)
  }
}

function save(
  site: DemoSite,
  step: Step,
  draft: MixDraft,
  before: Scenario | undefined,
  fresh: { name: string; mixId: string },
): Promise<Scenario> {
  const context: SolveContext = {
    run: (work) => work(site.as(step.by)),
    library: site.requirements,
    pool: site.solving,
  }
  const person = personOf(site, step.by)
  const request = { note: step.note, draft }
  return before
    ? createRevision(context, person, before, request)
    : createScenario(context, person, { ...fresh, ...request })
}

async function handIn(site: DemoSite, step: Step, scenario: Scenario): Promise<Scenario> {
  if (step.submit === undefined) return scenario
  const { revision } = scenario.latest
  const submission = { revision, note: step.submit }
  const submitted = await submitRevision(site.as(step.by), personOf(site, step.by), scenario, submission)
  if (!step.review) return submitted
  const { by, decision, text } = step.review
  const advisor = site.as(by)
  const { answer } = await getRevision(advisor, scenario.id, revision)
  const acknowledged = answer.cautions.filter(({ level }) => level === 'acknowledge').map(({ code }) => code)
  const review = { revision, decision, text, acknowledged }
  return reviewRevision(advisor, personOf(site, by), submitted, review)
}

function personOf({ people }: DemoSite, ref: string): Person {
  const person = people.get(ref)
  if (!person) throw new Error(`the demo has nobody called ${ref}`)
  return person
}

import type { Group, Need, NeedOverride, Requirement } from '@maslin/shared'

/**
 * The published requirement with the keeper's changes in it: each changed need keeps the figure before and the reason.
 * A need the tables do not hold is added as a minimum of the keeper's own. Amounts are per head and day.
 */
export function withOverrides(
  published: Requirement,
  overrides: readonly NeedOverride[],
  intakeOverride: Group['intakeOverride'],
): Requirement {
  const needs = published.needs.map((need) => changed(need, overrides))
  const added = overrides
    .filter(
      ({ nutrient }) => !published.needs.some((need) => need.nutrient === nutrient && need.kind === 'min'),
    )
    .map(ownNeed)
  return {
    ...published,
    intakeDryMatterKg: intakeOverride?.dryMatterKg ?? published.intakeDryMatterKg,
    needs: [...needs, ...added],
  }
}

function changed(need: Need, overrides: readonly NeedOverride[]): Need {
  if (need.kind !== 'min') return need
  const override = overrides.find(({ nutrient }) => nutrient === need.nutrient)
  if (!override) return need
  return {
    ...need,
    perHeadDay: override.perHeadDay,
    status: 'typed',
    override: { published: need.perHeadDay, reason: override.reason },
  }
}

function ownNeed({ nutrient, perHeadDay, reason }: NeedOverride): Need {
  return { nutrient, kind: 'min', perHeadDay, source: reason, status: 'typed' }
}

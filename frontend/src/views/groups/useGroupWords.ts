import type { Group, Stage } from '@maslin/shared'
import { useI18n } from 'vue-i18n'
import { useQuantities } from '../../composables/useQuantities'
import { baseDietOf, formOf, stageOf, type GroupForm } from './groupForm'

/** Words for what a form lacks and for what two versions of a group differ in. */
export function useGroupWords() {
  const { t } = useI18n()
  const { weight, amount } = useQuantities()

  function missingOf(form: GroupForm, stage: Stage | undefined): string {
    const names = [
      form.name.trim() ? undefined : 'name',
      form.species ? undefined : 'species',
      form.class ? undefined : 'class',
      stage ? undefined : 'stage',
      form.bodyWeightKg === undefined ? 'weight' : undefined,
      form.heads === undefined ? 'heads' : undefined,
      ...missingAsks(form, stage),
    ].filter((name) => name !== undefined)
    const words = names.map((name) => t(`groups.fields.${name}`))
    if (!baseDietOf(form.baseDiet)) words.push(t('groups.sections.baseDiet'))
    return words.join(', ')
  }

  function missingAsks(form: GroupForm, stage: Stage | undefined): string[] {
    const names = { dailyGainG: 'gain', milkKg: 'milk', litter: 'litter' } as const
    return (stage?.asks ?? []).filter((ask) => form[ask] === undefined).map((ask) => names[ask])
  }

  function linesOf(form: GroupForm, stages: readonly Stage[]): [string, string][] {
    const none = t('common.none')
    const stage = stageOf(form, stages)
    return [
      [t('groups.fields.name'), form.name],
      [t('groups.fields.heads'), String(form.heads ?? '')],
      [t('groups.fields.class'), stage?.classLabel ?? form.class ?? none],
      [t('groups.fields.stage'), stage?.stageLabel ?? form.stage ?? none],
      [t('groups.fields.weight'), form.bodyWeightKg === undefined ? none : weight(form.bodyWeightKg)],
      [t('groups.fields.gain'), form.dailyGainG === undefined ? none : weight(form.dailyGainG / 1000)],
      [t('groups.fields.milk'), form.milkKg === undefined ? none : weight(form.milkKg)],
      [t('groups.fields.litter'), form.litter === undefined ? none : String(form.litter)],
      [t('groups.fields.equids'), t(form.equidsCanReach ? 'common.yes' : 'common.no')],
      [
        t('groups.sections.baseDiet'),
        form.baseDiet
          .map(
            (row) =>
              `${t(`groups.baseDiet.modes.${row.mode}`)} ${row.dryMatterKg ? weight(row.dryMatterKg) : ''}`,
          )
          .join(', ') || none,
      ],
      [
        t('groups.sections.requirement'),
        form.needOverrides
          .map((one) => `${t(`nutrients.${one.nutrient}`)} ${amount(one.nutrient, one.perHeadDay)}`)
          .join(', ') || none,
      ],
      [t('groups.requirement.intake'), form.intakeOverride ? weight(form.intakeOverride.dryMatterKg) : none],
      [t('groups.fields.note'), form.note || none],
    ]
  }

  /** Only the lines that differ. */
  function differencesOf(theirs: Group, mine: GroupForm, stages: readonly Stage[]) {
    const yours = linesOf(mine, stages)
    return linesOf(formOf(theirs), stages)
      .map(([label, text], at) => ({ label, theirs: text, yours: yours[at]?.[1] ?? '' }))
      .filter((line) => line.theirs !== line.yours)
  }

  return { missingOf, missingAsks, differencesOf }
}

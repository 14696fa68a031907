import { nutrientIds, type Requirement } from '@maslin/shared'
import { useI18n } from 'vue-i18n'
import { useQuantities } from '../../composables/useQuantities'

type Note = Requirement['notes'][number]

/** Words for what the reader of a requirement must know, with its figures in the farm's units. */
export function useRequirementNotes() {
  const { t, te } = useI18n()
  const { weight } = useQuantities()

  const kg = (value: string | number | undefined) => weight(Number(value ?? 0))
  const grams = (value: string | number | undefined) => weight(Number(value ?? 0) / 1000)

  function outsideText({ params }: Note): string {
    switch (params['of']) {
      case 'bodyWeightKg':
        return t('groups.requirement.notes.outsideWeight', {
          low: kg(params['low']),
          high: kg(params['high']),
        })
      case 'dailyGainG':
        return t('groups.requirement.notes.outsideGain', {
          low: grams(params['low']),
          high: grams(params['high']),
        })
      case 'litter':
        return t('groups.requirement.notes.outsideLitter', { value: params['value'] ?? '' })
      default:
        return t('groups.requirement.notes.outsideTable')
    }
  }

  function noteText(note: Note): string {
    const { code, params } = note
    switch (code) {
      case 'interpolated':
        return t('groups.requirement.notes.interpolated', {
          low: kg(params['lowKg']),
          high: kg(params['highKg']),
        })
      case 'outsideTable':
        return outsideText(note)
      case 'derivedEnergy': {
        const from = nutrientIds.find((id) => id === params['from'])
        return t('groups.requirement.notes.derivedEnergy', { from: from ? t(`nutrients.${from}`) : '' })
      }
      case 'tableGain':
        return t('groups.requirement.notes.tableGain', { gain: grams(params['gainG']) })
      default: {
        const key = `groups.requirement.notes.${code}`
        return te(key) ? t(key) : code
      }
    }
  }

  return { noteText }
}

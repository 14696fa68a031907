import type { UnitSystem } from '@maslin/shared'
import { createPinia, setActivePinia } from 'pinia'
import { beforeEach, describe, expect, it } from 'vitest'
import { defineComponent, h } from 'vue'
import { mount } from '@vue/test-utils'
import { i18n } from '../i18n'
import { useSessionStore } from '../stores/session'
import { today } from './today'
import { useQuantities } from './useQuantities'

function quantitiesFor(units: UnitSystem, currency = 'USD') {
  const session = useSessionStore()
  session.session = {
    user: { id: 'u', name: 'Ann', email: 'ann@example.test' },
    memberships: [
      {
        role: 'owner',
        farm: { id: 'f', name: 'Hill', units, currency, version: 1, updatedAt: '2026-11-24T08:00:00Z' },
      },
    ],
  }
  session.enter('f')
  const Holder = defineComponent({ setup: (_, { expose }) => (expose({ ...useQuantities() }), () => h('i')) })
  return mount(Holder, { global: { plugins: [i18n] } }).vm as unknown as ReturnType<typeof useQuantities>
}
beforeEach(() => setActivePinia(createPinia()))

describe('figures of a US farm', () => {
  it('stand with unit and basis', () => {
    const q = quantitiesFor('us')
    expect(q.weight(0.535)).toBe('1.18 lb')
    expect(q.weight(0.009)).toBe('0.317 oz')
    expect(q.weight(907.18474)).toBe('2,000 lb')
    expect(q.money('0.5254')).toBe('$0.525')
    expect(q.money('598')).toBe('$598.00')
    expect(q.pricePerWeight('0.502654')).toBe('$0.228 / lb')
    expect(q.packagePrice('9.2', 50, 'lb')).toBe('$9.20 / 50 lb')
    expect(q.packagePrice('8.1', 1, 'bushel')).toBe('$8.10 / bu')
    expect(q.percent(0.1251)).toBe('12.5 %')
    expect(q.concentration('crudeProtein', 125)).toBe('12.5 % of DM')
    expect(q.concentration('metabolizableEnergy', 2.65)).toBe('1.20 Mcal/lb DM')
    expect(q.concentration('copper', 9.1)).toBe('9.1 mg/kg DM')
    expect(q.amount('crudeProtein', 214.2)).toBe('214 g')
    expect(q.date('2026-11-24')).toBe('Nov 24, 2026')
  })
})

describe('figures of a metric farm', () => {
  it('stand in kilograms', () => {
    const q = quantitiesFor('metric', 'EUR')
    expect(q.weight(0.535)).toBe('0.535 kg')
    expect(q.weight(0.02)).toBe('20 g')
    expect(q.pricePerWeight('0.502654')).toBe('€0.503 / kg')
    expect(q.concentration('metabolizableEnergy', 2.65)).toBe('2.65 Mcal/kg DM')
  })
})

it.each(['crudeProtein', 'metabolizableEnergy', 'copper', 'vitaminA'] as const)(
  'a shown %s is stored as it was',
  (id) => {
    const q = quantitiesFor('us')
    expect(q.storedConcentration(id, q.shownConcentration(id, 37.5))).toBeCloseTo(37.5, 10)
  },
)

it('today is the day on the calendar here', () => {
  expect(today(new Date(2026, 0, 5, 23, 59))).toBe('2026-01-05')
})

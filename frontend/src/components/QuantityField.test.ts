import { mount } from '@vue/test-utils'
import { createPinia } from 'pinia'
import { describe, expect, it } from 'vitest'
import { i18n } from '../i18n'
import { vuetify } from '../theme/vuetify'
import MoneyField from './MoneyField.vue'
import QuantityField from './QuantityField.vue'

const global = { plugins: [createPinia(), i18n, vuetify] }

function field(props: Record<string, unknown>) {
  const wrapper = mount(QuantityField, { global, props: { label: 'Weight', ...props } })
  return { wrapper, input: wrapper.get('input') }
}

describe('a field for a figure', () => {
  it('takes a weight with its unit and says how it was read', async () => {
    const { wrapper, input } = field({ kind: 'weight' })
    await input.setValue('70 kg')
    expect(wrapper.emitted('update:modelValue')?.at(-1)).toEqual([70])
    expect(wrapper.text()).toContain('read as 154 lb (70 kg)')
  })

  it('keeps what cannot be read, with the reason, and the last value', async () => {
    const { wrapper, input } = field({ kind: 'weight', modelValue: 70 })
    await input.setValue('70 sacks')
    expect(wrapper.emitted('update:modelValue')).toBeUndefined()
    expect(wrapper.emitted('update:valid')?.at(-1)).toEqual([false])
    expect(wrapper.text()).toContain('That unit is not known here.')
    expect((input.element as HTMLInputElement).value).toBe('70 sacks')
  })

  it('is empty for an unknown value, not zero', async () => {
    const { wrapper, input } = field({ modelValue: undefined })
    expect((input.element as HTMLInputElement).value).toBe('')
    await input.setValue('0')
    expect(wrapper.emitted('update:modelValue')?.at(-1)).toEqual([0])
    await input.setValue('')
    expect(wrapper.emitted('update:modelValue')?.at(-1)).toEqual([undefined])
  })

  it('follows a value set from outside', async () => {
    const { wrapper, input } = field({ kind: 'percent', modelValue: 0.125 })
    expect((input.element as HTMLInputElement).value).toBe('12.5')
    await wrapper.setProps({ modelValue: 0.2 })
    expect((input.element as HTMLInputElement).value).toBe('20')
  })
})

describe('a field for money', () => {
  it('takes a price together with its package', async () => {
    const wrapper = mount(MoneyField, { global, props: { label: 'Price', acceptPackage: true } })
    await wrapper.get('input').setValue('$19/25 lb')
    expect(wrapper.emitted('update:modelValue')?.at(-1)).toEqual(['19'])
    expect(wrapper.emitted('update:package')?.at(-1)).toEqual([{ quantity: 25, unit: 'lb' }])
    expect(wrapper.text()).toContain('read as $19.00 / 25 lb')
  })
})

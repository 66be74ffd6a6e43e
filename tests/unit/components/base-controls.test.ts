// @vitest-environment happy-dom
import { config, mount } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import { h } from 'vue'
import BaseButton from '~/components/base/BaseButton.vue'
import BaseDecimalInput from '~/components/base/BaseDecimalInput.vue'
import BaseField from '~/components/base/BaseField.vue'
import BaseKeypad from '~/components/base/BaseKeypad.vue'
import BaseSegments from '~/components/base/BaseSegments.vue'
import BaseStepper from '~/components/base/BaseStepper.vue'

/** Stands in for the framework's link, which needs a running application. */
config.global.components = { NuxtLink: { props: ['to'], template: '<a :href="to"><slot /></a>' } }

function touchAt(timeStamp: number): MouseEvent {
  return Object.defineProperty(new MouseEvent('click'), 'timeStamp', { value: timeStamp })
}

describe('BaseButton', () => {
  it('passes a press on, but none while busy', async () => {
    const button = mount(BaseButton, { slots: { default: 'Book in a lot' } })
    await button.trigger('click')
    expect(button.emitted('click')).toHaveLength(1)
    await button.setProps({ busy: true })
    await button.trigger('click')
    expect(button.emitted('click')).toHaveLength(1)
    expect(button.attributes('aria-busy')).toBe('true')
    expect(button.text()).toBe('Book in a lot')
  })

  it('takes a doubled touch at the bench once', () => {
    const button = mount(BaseButton, { props: { size: 'bench' } })
    button.element.dispatchEvent(touchAt(1000))
    button.element.dispatchEvent(touchAt(1250))
    button.element.dispatchEvent(touchAt(1600))
    expect(button.emitted('click')).toHaveLength(2)
  })

  it('is a link with `to`, and a switched-off button when it cannot be followed', async () => {
    const button = mount(BaseButton, { props: { to: '/jobs' } })
    expect(button.element.tagName).toBe('A')
    await button.setProps({ disabled: true })
    expect(button.element.tagName).toBe('BUTTON')
    expect(button.attributes('disabled')).toBeDefined()
  })
})

describe('BaseField around a control', () => {
  const field = (props: { error?: string, hint?: string }): ReturnType<typeof mount> =>
    mount(BaseField, { props: { label: 'Wet coat weight', ...props }, slots: { default: () => h(BaseDecimalInput, { modelValue: '120' }) } })

  it('names the control and describes it by error and hint', () => {
    const wrapper = field({ error: 'Sheet allows 110 to 150', hint: 'grams of wet film' })
    const input = wrapper.get('input')
    expect(wrapper.get('label').attributes('for')).toBe(input.attributes('id'))
    const texts = (input.attributes('aria-describedby') ?? '').split(' ').map(id => wrapper.get(`[id="${id}"]`).text())
    expect(texts).toEqual(['Sheet allows 110 to 150', 'grams of wet film'])
    expect(input.attributes('aria-invalid')).toBe('true')
  })

  it('says nothing of an error where there is none', () => {
    const input = field({}).get('input')
    expect(input.attributes('aria-invalid')).toBeUndefined()
    expect(input.attributes('aria-describedby')).toBeUndefined()
  })
})

describe('BaseDecimalInput', () => {
  it('takes a comma and gives a point', async () => {
    const wrapper = mount(BaseDecimalInput, { props: { modelValue: '' } })
    await wrapper.get('input').setValue('21,6')
    expect(wrapper.emitted('update:modelValue')?.at(-1)).toEqual(['21.6'])
    await wrapper.get('input').trigger('blur')
    expect(wrapper.get('input').element.value).toBe('21.6')
  })

  it('asks about 1.234,5 and takes the answer', async () => {
    const wrapper = mount(BaseDecimalInput, { props: { modelValue: '' } })
    await wrapper.get('input').setValue('1.234,5')
    expect(wrapper.emitted('invalid')).toEqual([[true]])
    expect(wrapper.emitted('update:modelValue')?.at(-1)).toEqual(['1.234,5'])
    expect(wrapper.get('[role=status]').text()).toContain('can be read in two ways')
    await wrapper.get('button').trigger('click')
    expect(wrapper.emitted('update:modelValue')?.at(-1)).toEqual(['1234.5'])
    expect(wrapper.emitted('invalid')?.at(-1)).toEqual([false])
    expect(wrapper.find('[role=status]').exists()).toBe(false)
  })

  it('keeps what cannot be read in the field', async () => {
    const wrapper = mount(BaseDecimalInput, { props: { modelValue: '5' } })
    await wrapper.get('input').setValue('a lot')
    await wrapper.get('input').trigger('blur')
    expect(wrapper.get('input').element.value).toBe('a lot')
    expect(wrapper.get('[role=status]').text()).toBe('This is not a number.')
  })

  it('shows a value set from outside', async () => {
    const wrapper = mount(BaseDecimalInput, { props: { modelValue: '5' } })
    await wrapper.setProps({ modelValue: '7.25' })
    expect(wrapper.get('input').element.value).toBe('7.25')
  })
})

describe('BaseKeypad', () => {
  const key = (wrapper: ReturnType<typeof mount>, name: string): Promise<void> =>
    wrapper.findAll('button').find(button => (button.attributes('aria-label') ?? button.text()) === name)?.trigger('click') ?? Promise.reject(new Error(`no key ${name}`))

  it('replaces the number with the first digit and adds the next ones', async () => {
    const wrapper = mount(BaseKeypad, { props: { 'modelValue': '21.6', 'label': 'Area', 'onUpdate:modelValue': (value: string) => wrapper.setProps({ modelValue: value }) } })
    await key(wrapper, '3')
    await key(wrapper, 'Point')
    await key(wrapper, '5')
    expect(wrapper.emitted('update:modelValue')?.map(([value]) => value)).toEqual(['3', '3.', '3.5'])
  })

  it('replaces again when another number opens', async () => {
    const wrapper = mount(BaseKeypad, { props: { 'modelValue': '', 'label': 'Area', 'replaceKey': 'area', 'onUpdate:modelValue': (value: string) => wrapper.setProps({ modelValue: value }) } })
    await key(wrapper, '4')
    await wrapper.setProps({ replaceKey: 'reserve', modelValue: '150' })
    await key(wrapper, '6')
    expect(wrapper.emitted('update:modelValue')?.at(-1)).toEqual(['6'])
  })

  it('has no point for whole numbers', () => {
    const wrapper = mount(BaseKeypad, { props: { label: 'PIN', maxDecimals: 0 } })
    expect(wrapper.findAll('button').map(button => button.text())).not.toContain('.')
  })
})

describe('BaseSegments', () => {
  it('is a radio group, and a choice that does not fit says why', async () => {
    const options = [{ value: 'area', label: 'Panel area' }, { value: 'tin', label: 'Left in the tin', disabled: true, reason: 'no tin is open' }]
    const wrapper = mount(BaseSegments, { props: { modelValue: 'tin', label: 'How much', options } })
    expect(wrapper.get('[role=radiogroup]').attributes('aria-label')).toBe('How much')
    await wrapper.get('input[value=area]').setValue()
    expect(wrapper.emitted('update:modelValue')).toEqual([['area']])
    expect(wrapper.get('input[value=tin]').attributes('disabled')).toBeDefined()
    expect(wrapper.findAll('label')[1]?.text()).toContain('no tin is open')
  })
})

describe('BaseStepper', () => {
  it.each([['ArrowUp', 3], ['ArrowDown', 1], ['Home', 1], ['End', 6]])('moves by %s to %i', async (name, next) => {
    const wrapper = mount(BaseStepper, { props: { modelValue: 2, label: 'Coats', min: 1, max: 6 } })
    await wrapper.get('[role=spinbutton]').trigger('keydown', { key: name })
    expect(wrapper.emitted('update:modelValue')).toEqual([[next]])
  })

  it('stops at its ends', async () => {
    const wrapper = mount(BaseStepper, { props: { modelValue: 6, label: 'Coats', min: 1, max: 6 } })
    await wrapper.get('[role=spinbutton]').trigger('keydown', { key: 'ArrowUp' })
    expect(wrapper.emitted('update:modelValue')).toBeUndefined()
    expect(wrapper.findAll('button')[1]?.attributes('disabled')).toBeDefined()
  })
})

// @vitest-environment happy-dom
import { config, mount } from '@vue/test-utils'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { nextTick } from 'vue'
import BaseListState from '~/components/base/BaseListState.vue'
import BaseLoading from '~/components/base/BaseLoading.vue'
import BaseNumber from '~/components/base/BaseNumber.vue'
import BaseState from '~/components/base/BaseState.vue'
import BaseTable from '~/components/base/BaseTable.vue'
import { MARKS } from '~/utils/marks'
import { STATES, type StateName } from '~/utils/states'

/** Stands in for the framework's link, which needs a running application. */
config.global.components = { NuxtLink: { props: ['to'], template: '<a :href="to"><slot /></a>' } }

interface Batch { code: string, day: string }

const rows: Batch[] = [{ code: 'B-3', day: 'Tue' }, { code: 'B-2', day: 'Tue' }, { code: 'B-1', day: 'Mon' }]
const columns = [{ key: 'code', label: 'Batch', text: (row: Batch) => row.code }]

describe('BaseTable', () => {
  const table = (): ReturnType<typeof mount> => mount(BaseTable<Batch>, {
    props: { caption: 'Batches', columns, rows, rowKey: (row: Batch) => row.code, groupBy: (row: Batch) => row.day, opens: true },
    attachTo: document.body,
  })

  it('heads each group once', () => {
    const wrapper = table()
    expect(wrapper.findAll('[scope=rowgroup]').map(head => head.text())).toEqual(['Tue', 'Mon'])
    wrapper.unmount()
  })

  it('moves by arrows over the group headings and opens with Enter', async () => {
    const wrapper = table()
    const found = wrapper.findAll<HTMLElement>('tr[data-row]')
    expect(found.map(row => row.attributes('tabindex'))).toEqual(['0', '-1', '-1'])
    found[0]?.element.focus()
    await found[0]?.trigger('keydown', { key: 'End' })
    expect(document.activeElement?.textContent).toContain('B-1')
    await found[2]?.trigger('keydown', { key: 'ArrowUp' })
    expect(document.activeElement?.textContent).toContain('B-2')
    await found[1]?.trigger('keydown', { key: 'Enter' })
    expect(wrapper.emitted('open')).toEqual([[rows[1]]])
    wrapper.unmount()
  })

  it('leaves presses on controls inside a row to those controls', async () => {
    const wrapper = mount(BaseTable<Batch>, {
      props: { caption: 'Batches', columns, rows: rows.slice(0, 1), rowKey: (row: Batch) => row.code, opens: true },
      slots: { 'cell-code': '<button class="inner">Print</button>' },
    })
    await wrapper.get('.inner').trigger('click')
    expect(wrapper.emitted('open')).toBeUndefined()
    await wrapper.get('td').trigger('click')
    expect(wrapper.emitted('open')).toHaveLength(1)
  })
})

describe('BaseListState', () => {
  const list = (props: { pending: boolean, empty: boolean, error?: string }): ReturnType<typeof mount> =>
    mount(BaseListState, { props: { emptyTitle: 'No batches yet', ...props }, slots: { default: '<p class="rows">rows</p>' } })

  it('shows the empty state, the error with a way to retry, or the rows', async () => {
    expect(list({ pending: false, empty: true }).text()).toContain('No batches yet')
    const failed = list({ pending: false, empty: true, error: 'The server does not answer.' })
    expect(failed.get('[role=alert]').text()).toContain('The server does not answer.')
    await failed.get('button').trigger('click')
    expect(failed.emitted('retry')).toHaveLength(1)
    expect(list({ pending: false, empty: false }).find('.rows').exists()).toBe(true)
  })

  it('keeps the rows it had while it reads again', () => {
    const wrapper = list({ pending: true, empty: false })
    expect(wrapper.find('.rows').exists()).toBe(true)
    expect(wrapper.get('[aria-busy=true]').classes()).toContain('opacity-60')
  })
})

describe('BaseLoading', () => {
  beforeEach(() => { vi.useFakeTimers() })
  afterEach(() => { vi.useRealTimers() })

  it('shows its bars only after 300 ms', async () => {
    const wrapper = mount(BaseLoading, { props: { rows: 3 } })
    vi.advanceTimersByTime(299)
    await nextTick()
    expect(wrapper.findAll('.waiting')).toHaveLength(0)
    vi.advanceTimersByTime(1)
    await nextTick()
    expect(wrapper.findAll('.waiting')).toHaveLength(3)
    expect(wrapper.get('[role=status]').text()).toBe('Loading')
  })
})

describe('BaseNumber', () => {
  it('sets thin spaces as elements and keeps the unit beside the number', () => {
    const wrapper = mount(BaseNumber, { props: { value: '1490', decimals: 1 } })
    expect(wrapper.text()).toBe('1\u2009490.0\u00A0g')
    expect(wrapper.findAll('.ts')).toHaveLength(1)
  })
})

describe('BaseState', () => {
  it.each(Object.keys(STATES) as StateName[])('%s is a shape and a word', (state) => {
    const wrapper = mount(BaseState, { props: { state } })
    expect(wrapper.text()).toBe(STATES[state].word)
    expect(wrapper.findAll('svg path')).toHaveLength(MARKS[STATES[state].mark].length)
  })

  it('gives every state of one thing a shape or a tone of its own', () => {
    const looks = Object.entries(STATES).map(([name, look]) => `${name.split('-')[0]} ${look.mark} ${look.tone}`)
    expect(new Set(looks).size).toBe(looks.length)
  })
})

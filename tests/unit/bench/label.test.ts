// @vitest-environment happy-dom
import { mount } from '@vue/test-utils'
import { create } from 'qrcode'
import { describe, expect, it } from 'vitest'
import { pictogramsOf } from '#shared/reference/pictograms'
import type { Pictogram } from '#shared/reference/pictograms'
import { diamondRows, labelAddress, labelOfRun, warningsOf } from '#shared/utils/cup-label'
import LabelSheet from '~/components/label/LabelSheet.vue'
import { drawQr } from '~/utils/qr'
import { begin, kit, pour } from './pots'
import { id, snapshot } from './shop'

describe('the diamonds of a mixture', () => {
  // CLP Annex V and Article 26, from memory.
  it.each([
    [['H226', 'H336', 'EUH066'], ['flame', 'exclamation']],
    [['H226', 'H317', 'H332', 'H335', 'EUH204'], ['flame', 'exclamation']],
    [['H242', 'H318', 'H302', 'H315'], ['flame', 'corrosion', 'exclamation']],
    [['H314', 'H315'], ['corrosion']],
    [['H334', 'H317', 'H319'], ['health']],
    [['H301', 'H315'], ['skull']],
    [['H361fd', 'H412'], ['health']],
    [['H410', 'H241'], ['explosive', 'flame', 'environment']],
    [[], []],
  ])('of %j are %j', (codes, kinds) => expect(pictogramsOf(codes)).toEqual(kinds))
})

const all: Pictogram[] = ['explosive', 'flame', 'oxidiser', 'gas', 'corrosion', 'skull', 'exclamation', 'health', 'environment']

describe('the label of a pot', () => {
  const run = { ...pour(pour(pour(begin(), '876.5'), '438.2', 60_000), '175.3', 120_000), code: 'B-0421' }

  it('says what is in the cup, from which lots, until when', () => {
    expect(labelOfRun(run, kit, snapshot({ people: [{ id: id(92), name: 'Tilda V.', initials: 'TV' }] }))).toEqual({
      code: 'B-0421',
      mixName: 'Sealer',
      purpose: 'sample',
      lines: [
        { code: 'PS-210', grams: '876.5', lots: 'L-21' },
        { code: 'PH-40', grams: '438.2', lots: 'L-24' },
        { code: 'PT-9', grams: '175.3', lots: 'L-25' },
      ],
      signalWord: null,
      pictograms: [],
      isocyanates: true,
      // 240 min from the first gram of hardener at 08:01.
      useBy: Date.parse('2026-11-17T12:01:00.000Z'),
      mixedAt: Date.parse('2026-11-17T08:02:00.000Z'),
      mixedBy: 'Tilda V.',
    })
  })

  it.each([0, 1, 5, 6, 7, 9])('carries all of %i diamonds, in 62 × 40 mm', (count) => {
    const shown = { ...labelOfRun(run, kit, snapshot()), pictograms: all.slice(0, count) }
    expect(shown.pictograms).toHaveLength(count)
    const sheet = mount(LabelSheet, { props: { label: shown, qr: null, zone: 'UTC', decimals: 1, mm: '1mm' } })
    expect(sheet.findAll('.label-diamond')).toHaveLength(count)
    const { mm, columns } = diamondRows(count)
    const rows = columns === 0 ? 0 : Math.ceil(count / columns)
    // 58 mm between the insets, 24 of them for words; two rows must leave the code of 15.5 mm its room.
    expect(columns * Number(mm) + (columns - 1) * 0.9).toBeLessThanOrEqual(34)
    expect(rows * Number(mm) + (rows - 1) * 0.3).toBeLessThanOrEqual(8)
  })

  it('has no use-by where nothing reacts', () => {
    const { mixes: [mix] } = snapshot()
    if (mix === undefined) throw new Error('no mix')
    const plain = { ...kit, mix: { ...mix, potLifeMin: null, potLifeTable: null } }
    expect(labelOfRun({ ...run, reactiveAt: null }, plain, snapshot()).useBy).toBeNull()
  })

  it('carries the stronger signal word', () => {
    const one = { signalWord: 'Warning' as const, containsIsocyanates: false, hazards: [] }
    expect(warningsOf([one]).signalWord).toBe('Warning')
    expect(warningsOf([one, { ...one, signalWord: 'Danger' }]).signalWord).toBe('Danger')
  })
})

describe('the code on the label', () => {
  it('says the address of the batch\'s own page', () => {
    expect(labelAddress('https://pots.example', `/batches/${id(90)}`)).toBe(`https://pots.example/batches/${id(90)}`)
  })

  it('draws every dark module of that text at level M, and no other', () => {
    const text = labelAddress('http://192.168.10.20:3000', `/batches/${id(90)}`)
    const { modules, errorCorrectionLevel } = create(text, { errorCorrectionLevel: 'M' })
    const { size, d } = drawQr(text)
    const drawn = new Set([...d.matchAll(/M(\d+) (\d+)h1v1h-1z/g)].map(([, x, y]) => `${x} ${y}`))
    const dark = Array.from({ length: modules.size ** 2 }, (_, place) => [place % modules.size, Math.floor(place / modules.size)] as const)
      .filter(([x, y]) => modules.get(y, x))
    expect(errorCorrectionLevel.bit).toBe(0)
    expect(size).toBe(modules.size)
    expect(drawn).toEqual(new Set(dark.map(([x, y]) => `${x} ${y}`)))
    expect(drawQr(`${text}#`).d).not.toBe(d)
  })
})

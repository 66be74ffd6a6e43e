import { describe, expect, it } from 'vitest'
import { benchFiles } from '../../../modules/bench-worker'

const built = {
  'entry.js': { file: 'entry.1.js', isEntry: true, css: ['entry.1.css'], assets: ['sans.1.woff2'], dynamicImports: ['pages/jobs/index.vue', 'error.vue'] },
  'error.vue': { file: 'error.1.js', src: 'error.vue' },
  'pages/jobs/index.vue': { file: 'jobs.1.js', src: 'pages/jobs/index.vue', imports: ['_table.js'] },
  '_table.js': { file: 'table.1.js' },
  '_index.js': { file: 'bench.1.js', imports: ['_decimal.js'], dynamicImports: ['components/bench/BenchStir.vue', 'utils/qr.ts'] },
  '_decimal.js': { file: 'decimal.1.js' },
  'components/bench/BenchStir.vue': { file: 'stir.1.js', src: 'components/bench/BenchStir.vue', imports: ['_decimal.js', '_mark.js'] },
  '_mark.js': { file: 'mark.1.js' },
  'utils/qr.ts': { file: 'qr.1.js', src: 'utils/qr.ts' },
}

describe('the files that a bench keeps for a start without network', () => {
  it('are the entry, its page with all that it opens later, and nothing of the office', () => {
    expect(benchFiles(built)).toEqual(['bench.1.js', 'decimal.1.js', 'entry.1.css', 'entry.1.js', 'error.1.js', 'mark.1.js', 'qr.1.js', 'sans.1.woff2', 'stir.1.js'])
  })

  it('stop the build where the bench\'s page is not among them', () => {
    const { 'components/bench/BenchStir.vue': _gone, '_index.js': _page, ...rest } = built
    expect(() => benchFiles(rest)).toThrow(/BenchStir/)
  })
})

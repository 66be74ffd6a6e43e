// @ts-check
import withNuxt from './.nuxt/eslint.config.mjs'

/** Borders between the rooms of the code: a wrong import is a fault here, not a matter of taste. */
const frameworks = ['vue', 'vue-*', 'h3', 'nitropack', 'nitropack/*', '#imports', '#app', '#app/*', 'nuxt', 'nuxt/*', '@vueuse/*', 'pinia']
const database = ['knex', 'mysql2', 'mysql2/*']

export default withNuxt(
  {
    rules: {
      '@typescript-eslint/no-explicit-any': 'error',
      'no-console': 'error',
      'vue/multi-word-component-names': ['error', { ignores: ['default', 'office', 'bench', 'screen', 'plain', 'error', 'app', 'index', 'new', 'edit', 'revise', '[id]', '[boothId]', 'shop', 'me', 'settings', 'sheet', 'parts'] }],
      'vue/html-self-closing': ['error', { html: { void: 'any', normal: 'any', component: 'any' } }],
      'vue/require-default-prop': 'off',
      'vue/no-multiple-template-root': 'off',
    },
  },
  {
    name: 'potbell/shared-knows-no-framework',
    files: ['shared/**/*.ts'],
    rules: {
      'no-restricted-imports': ['error', { patterns: [{ group: [...frameworks, ...database, '~/*', '#server/*'], message: 'shared/ imports no framework and nothing of the application or server.' }] }],
    },
  },
  {
    name: 'potbell/engine-is-pure',
    files: ['shared/engine/**/*.ts'],
    rules: {
      'no-restricted-globals': ['error', 'Date', 'Number', 'Math', 'parseFloat', 'parseInt', 'fetch', 'process', 'performance', 'setTimeout'],
      'no-restricted-properties': ['error', { property: 'toFixed', message: 'Decimals leave through the engine\'s own printing.' }, { property: 'toNumber', message: 'No floats in the arithmetic.' }],
    },
  },
  {
    name: 'potbell/no-sql-outside-repositories',
    files: ['server/api/**/*.ts', 'server/routes/**/*.ts', 'pages/**/*.vue', 'stores/**/*.ts', 'components/**/*.vue', 'composables/**/*.ts'],
    rules: {
      'no-restricted-imports': ['error', { patterns: [{ group: database, message: 'SQL lives in server/repositories.' }] }],
    },
  },
  {
    name: 'potbell/one-clock',
    files: ['server/services/**/*.ts', 'server/repositories/**/*.ts'],
    rules: {
      'no-restricted-syntax': [
        'error',
        { selector: 'CallExpression[callee.object.name="Date"][callee.property.name="now"]', message: 'Ask the clock of the context.' },
        { selector: 'NewExpression[callee.name="Date"][arguments.length=0]', message: 'Ask the clock of the context.' },
        { selector: 'CallExpression[callee.property.name="returning"]', message: 'MariaDB through Knex returns nothing here.' },
      ],
    },
  },
  {
    name: 'potbell/commands-may-print',
    files: ['scripts/**', 'seeds/**'],
    rules: { 'no-console': 'off' },
  },
)

// Nuxt's own rules, and the rules of the house that a linter can hold.
import { existsSync } from 'node:fs'

// Node 20 is without this one, which the library that joins the rules calls.
Object.groupBy ??= (items, keyOf) => {
  const groups = Object.create(null)
  for (const item of items) (groups[keyOf(item)] ??= []).push(item)
  return groups
}

const prepared = new URL(`./${process.env.LAPWRIGHT_BUILD_DIR ?? '.nuxt'}/eslint.config.mjs`, import.meta.url)
if (!existsSync(prepared)) throw new Error('Run "npx nuxt prepare" first: it writes the linter\'s list of Nuxt\'s names.')
const { default: withNuxt } = await import(prepared.href)

const PURE = ['server/utils/laps/**/*.ts', 'server/utils/trials/**/*.ts', 'shared/**/*.ts']
const NEVER_IN_PURE = [
  'h3', 'knex', 'pg', 'pg-*', 'nuxt', 'nuxt/*', '@nuxt/*', '#*', 'vue', 'vue-*', 'pinia', 'nitropack', 'nitropack/*',
  'ofetch', 'formidable', 'node:*', 'fs', 'fs/*', 'path', 'os', 'crypto', 'http', 'https', 'net', 'child_process',
  'worker_threads', 'stream',
]
const NOT_GLOBAL_IN_PURE = [
  'process', 'Buffer', 'window', 'document', 'localStorage', 'fetch', '$fetch', 'setTimeout', 'setInterval',
].map(name => ({ name, message: 'Pure code takes what it needs as arguments.' }))

const NO_CLOCK = 'Pure code has no clock: take the time as an argument.'
const NO_CHANCE = 'Pure code has no random source: take a seed as an argument.'

const CLOCK_AND_CHANCE = [
  { selector: 'MemberExpression[object.name="Date"][property.name="now"]', message: NO_CLOCK },
  { selector: 'NewExpression[callee.name="Date"][arguments.length=0]', message: NO_CLOCK },
  { selector: 'CallExpression[callee.name="Date"]', message: NO_CLOCK },
  { selector: 'MemberExpression[object.name="performance"]', message: NO_CLOCK },
  { selector: 'MemberExpression[object.name="Math"][property.name="random"]', message: NO_CHANCE },
  { selector: 'MemberExpression[object.name="crypto"]', message: NO_CHANCE },
]
const NO_DEFAULT_EXPORT = { selector: 'ExportDefaultDeclaration', message: 'Export it by name: a default export is for files that a framework reads.' }
const NO_BARREL = { selector: 'ExportAllDeclaration', message: 'No barrel files: import from where a thing is defined.' }
const WRAPPED_ROUTES = {
  selector: 'CallExpression[callee.name=/^(defineEventHandler|eventHandler|defineLazyEventHandler|lazyEventHandler|defineCachedEventHandler|cachedEventHandler)$/]',
  message: 'Every route is made by defineApiHandler (server/utils/api.ts): who asks, is the input right, do one thing, answer.',
}
const NO_EMPTY_TEST = [
  {
    selector: 'CallExpression[callee.name="expect"][arguments.length=1][arguments.0.type="Literal"]',
    message: 'A test that expects a constant cannot fail.',
  },
  {
    selector: 'ExpressionStatement > CallExpression[callee.name="expect"]',
    message: 'This expectation says nothing: call a matcher on it.',
  },
]
const ONLY_DB = [{
  group: ['knex', 'knex/*', 'pg', 'pg-pool', 'pg-copy-streams'],
  message: 'Only server/utils/db imports Knex and the PostgreSQL driver.',
  allowTypeImports: true,
}]

export default withNuxt(
  {
    name: 'lapwright/ignores',
    ignores: ['**/.nuxt*/**', '**/.output*/**', '.lapwright/**', '.lapwright-test/**', 'storage/**', 'fixtures/**', 'look/**'],
  },
  {
    name: 'lapwright/size',
    files: ['**/*.{ts,mjs,vue}'],
    rules: {
      'max-lines': ['error', { max: 300, skipBlankLines: true, skipComments: true }],
    },
  },
  {
    name: 'lapwright/components',
    files: ['components/**/*.vue', 'layouts/**/*.vue', 'pages/**/*.vue'],
    rules: {
      'max-lines': ['error', { max: 200, skipBlankLines: true, skipComments: true }],
      // The folder names the subject; a page's name is its address.
      'vue/multi-word-component-names': 'off',
    },
  },
  {
    name: 'lapwright/form',
    files: ['**/*.{ts,mjs}'],
    rules: {
      '@stylistic/max-len': ['error', {
        code: 120, ignoreUrls: true, ignoreRegExpLiterals: true, ignoreStrings: true, ignoreTemplateLiterals: true,
      }],
      'no-restricted-syntax': ['error', NO_BARREL],
      'no-console': 'off',
      // The order of nuxt.config.ts follows its subject.
      'nuxt/nuxt-config-keys-order': 'off',
    },
  },
  {
    name: 'lapwright/functions',
    files: [
      'server/**/*.ts', 'shared/**/*.ts', 'composables/**/*.ts', 'stores/**/*.ts', 'scripts/**/*.{ts,mjs}', 'seeds/**/*.ts',
    ],
    rules: {
      'max-lines-per-function': ['error', { max: 50, skipBlankLines: true, skipComments: true, IIFEs: true }],
    },
  },
  {
    name: 'lapwright/database-in-one-place',
    files: [
      'server/**/*.ts', 'shared/**/*.ts', 'app.vue', 'pages/**', 'components/**', 'composables/**', 'stores/**', 'plugins/**',
    ],
    ignores: ['server/utils/db/**', 'server/utils/db.ts'],
    rules: {
      '@typescript-eslint/no-restricted-imports': ['error', { patterns: ONLY_DB }],
    },
  },
  {
    name: 'lapwright/named-exports',
    files: ['server/utils/**/*.ts', 'shared/**/*.ts', 'composables/**/*.ts', 'stores/**/*.ts'],
    rules: {
      'no-restricted-syntax': ['error', NO_BARREL, NO_DEFAULT_EXPORT],
    },
  },
  {
    name: 'lapwright/pure',
    files: PURE,
    rules: {
      'no-restricted-syntax': ['error', NO_BARREL, NO_DEFAULT_EXPORT, ...CLOCK_AND_CHANCE],
      '@typescript-eslint/no-restricted-imports': ['error', {
        patterns: [{ group: NEVER_IN_PURE, message: 'Pure code imports no framework, no database, no file system.' }],
      }],
      'no-restricted-globals': ['error', ...NOT_GLOBAL_IN_PURE],
    },
  },
  {
    name: 'lapwright/wrapped-routes',
    files: ['server/api/**/*.ts'],
    rules: {
      'no-restricted-syntax': ['error', NO_BARREL, WRAPPED_ROUTES],
    },
  },
  {
    name: 'lapwright/tests',
    files: ['tests/**/*.ts'],
    rules: {
      'max-lines': ['error', { max: 500, skipBlankLines: true, skipComments: true }],
      'no-restricted-syntax': ['error', NO_BARREL, ...NO_EMPTY_TEST],
    },
  },
)

import { fileURLToPath } from 'node:url'
import stylistic from '@stylistic/eslint-plugin'
import importX, { createNodeResolver } from 'eslint-plugin-import-x'
import vue from 'eslint-plugin-vue'
import tseslint from 'typescript-eslint'

/**
 * Layers: who may import whom (DEVELOPERS.md). Each folder has exactly one `no-restricted-imports` entry, since two
 * for the same file replace each other; bans are `regex`, because a `#` starts a comment in a `group`.
 */
const ban = (regex, message) => ({ regex, message })
const BAN_PARENT_SHARED = ban('^(\\.\\./)+shared/', 'import it as #shared/…')
const LAYERS = [
  ['shared/geometry/**', [ban('^(?!\\.{1,2}/|#shared/geometry/|jstat$|ml-matrix$|simple-statistics$)', 'shared/geometry imports itself and a numeric library only')]],
  ['shared/types/**', [ban('^(?!\\./|#shared/|zod$)', 'shared/types imports zod and shared/ only')]],
  ['shared/schemas/**', [ban('^(?!\\.{1,2}/|#shared/|zod$)', 'shared/schemas imports zod and shared/ only')]],
  ['app/marking/**', [ban('^(?!\\.{1,2}/|~/marking/|#shared/)', 'app/marking is pure: itself and shared/ only')]],
  ['app/upload/**', [ban('^(?!\\.{1,2}/|~/upload/|#shared/|zod$)', 'app/upload is pure: itself and shared/ only')]],
  ['app/stores/**', [ban('^#server|^~/(components|pages)', 'stores import app/marking, app/utils and shared/')]],
  ['app/composables/**', [ban('^#server|^~/(components|pages)', 'composables import app/marking, app/utils and shared/')]],
  ['app/{components,pages,layouts,middleware,plugins,utils}/**', [ban('^#server|server/', 'app/ never imports server/, not even a type')]],
  ['server/database/**', [ban('^(?!\\.{1,2}/|#shared/(types|schemas)/|drizzle-orm|pg$)', 'server/database imports drizzle and shared types only')]],
  ['server/adapters/**', [ban('^#server/(?!adapters/)|^~|^h3$', 'an adapter imports its one technology and shared/'), BAN_PARENT_SHARED]],
  ['server/services/**', [ban('^(#server/(?!services/|database/|adapters/)|~|h3$|#imports)', 'services import database, adapters and shared/'), BAN_PARENT_SHARED]],
  ['server/jobs/**', [ban('^(#server/(?!services/|jobs/|adapters/logger)|~|h3$|#imports)', 'jobs import services and shared/'), BAN_PARENT_SHARED]],
  ['server/utils/**', [ban('^(#server/(?!services/|adapters/(settings|logger))|~)', 'server/utils is HTTP glue: h3, services and shared/')]],
  ['server/api/**', [ban('^(#server/(?!services/|utils/)|~)', 'handlers import services, server/utils and shared/')]],
]

const at = path => fileURLToPath(new URL(path, import.meta.url))
const resolver = createNodeResolver({
  extensions: ['.ts', '.vue', '.mjs', '.js'],
  alias: { '~': [at('./app')], '#shared': [at('./shared')], '#server': [at('./server')] },
})

const TYPED = ['app/**/*.{ts,vue}', 'server/**/*.ts', 'shared/**/*.ts']
const EXEMPT_FROM_SIZE = ['tests/**', 'server/database/schema/**', 'shared/schemas/**', 'docker-local/demo/**', '*.config.*', 'docker-local/seed*.mjs']

export default tseslint.config(
  { ignores: ['node_modules/', '.nuxt/', '.output/', '.builds/', '.data/', 'drizzle/meta/', 'coverage/', 'public/'] },
  ...tseslint.configs.recommended,
  ...vue.configs['flat/recommended'],
  stylistic.configs.customize({ indent: 2, quotes: 'single', semi: false, commaDangle: 'always-multiline', braceStyle: '1tbs', arrowParens: false }),
  { files: ['**/*.vue'], languageOptions: { parserOptions: { parser: tseslint.parser, extraFileExtensions: ['.vue'] } } },
  {
    rules: {
      '@stylistic/arrow-parens': 'off',
      '@stylistic/max-statements-per-line': 'off',
      '@stylistic/operator-linebreak': ['error', 'before', { overrides: { '=': 'after' } }],
      '@stylistic/quote-props': ['error', 'consistent-as-needed'],
      '@stylistic/member-delimiter-style': ['error', { multiline: { delimiter: 'none' }, singleline: { delimiter: 'comma', requireLast: false } }],
      '@typescript-eslint/no-explicit-any': 'error',
      '@typescript-eslint/no-non-null-assertion': 'error',
      '@typescript-eslint/consistent-type-imports': ['error', { fixStyle: 'inline-type-imports', disallowTypeAnnotations: false }],
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_', ignoreRestSiblings: true }],
      'no-eval': 'error',
      'no-console': 'error',
      'no-empty': ['error', { allowEmptyCatch: false }],
      'eqeqeq': ['error', 'always', { null: 'ignore' }],
      'vue/multi-word-component-names': 'off',
      'vue/no-v-html': 'error',
      'vue/block-order': ['error', { order: ['script', 'template', 'style'] }],
      'vue/define-props-declaration': ['error', 'type-based'],
      'vue/define-emits-declaration': ['error', 'type-based'],
      'vue/max-attributes-per-line': 'off',
      'vue/singleline-html-element-content-newline': 'off',
      'vue/html-self-closing': ['error', { html: { void: 'any', normal: 'any', component: 'always' }, svg: 'any' }],
      'vue/require-default-prop': 'off',
    },
  },
  {
    files: ['app/**/*.{ts,vue}', 'server/**/*.ts', 'shared/**/*.ts', 'docker-local/**/*.mjs'],
    ignores: EXEMPT_FROM_SIZE,
    rules: {
      'max-lines': ['error', { max: 300, skipBlankLines: true, skipComments: true }],
      'max-lines-per-function': ['error', { max: 50, skipBlankLines: true, skipComments: true }],
      'complexity': ['error', 12],
      'max-depth': ['error', 3],
    },
  },
  { files: ['app/**/*.vue'], rules: { 'max-lines': ['error', { max: 250, skipBlankLines: true, skipComments: true }], 'max-lines-per-function': 'off' } },
  // A setup store is one function by its nature; the file's own limit holds.
  { files: ['app/stores/**'], rules: { 'max-lines-per-function': 'off' } },
  { files: TYPED, plugins: { 'import-x': importX }, settings: { 'import-x/resolver-next': [resolver] }, rules: { 'import-x/no-cycle': ['error', { maxDepth: 6 }] } },
  {
    files: ['server/**/*.ts'],
    languageOptions: { parserOptions: { project: './.nuxt/tsconfig.server.json', tsconfigRootDir: import.meta.dirname } },
    rules: {
      '@typescript-eslint/no-floating-promises': 'error',
      'no-restricted-properties': ['error', { object: 'Math', property: 'random', message: 'node:crypto makes what nobody may guess' }],
    },
  },
  {
    files: ['server/**/*.ts'],
    ignores: ['server/utils/api-error.ts'],
    rules: { 'no-restricted-syntax': ['error', { selector: 'CallExpression[callee.name="createError"]', message: 'throw an AppError; server/utils/api-error.ts gives it its form' }] },
  },
  ...LAYERS.map(([files, patterns]) => ({ files: [files], rules: { 'no-restricted-imports': ['error', { patterns }] } })),
  { files: ['docker-local/**/*.mjs', 'tests/**', '*.config.*'], rules: { 'no-console': 'off', '@typescript-eslint/no-non-null-assertion': 'off' } },
)

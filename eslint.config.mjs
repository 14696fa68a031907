import js from '@eslint/js'
import prettier from 'eslint-config-prettier'
import vue from 'eslint-plugin-vue'
import vueA11y from 'eslint-plugin-vuejs-accessibility'
import tseslint from 'typescript-eslint'
import vueParser from 'vue-eslint-parser'

/** Forbids imports of the given packages or folders, so that the arrows between layers go one way. */
const forbidImports = (...patterns) => ({
  'no-restricted-imports': ['error', { patterns: patterns.map(([group, message]) => ({ group, message })) }],
})

const models = [
  ['**/models', '**/models/*'],
  'Rows are reached through repositories made by inFarm(farmId, transaction).',
]

export default tseslint.config(
  { ignores: ['**/dist/**', '**/node_modules/**', '.maslin/**', '.cache/**', 'coverage/**'] },
  js.configs.recommended,
  ...tseslint.configs.recommended,
  ...vue.configs['flat/recommended'],
  ...vueA11y.configs['flat/recommended'],
  {
    rules: {
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_' }],
      '@typescript-eslint/consistent-type-imports': ['error', { disallowTypeAnnotations: false }],
      'no-undef': 'off',
    },
  },
  {
    files: ['**/*.vue'],
    languageOptions: {
      parser: vueParser,
      parserOptions: { parser: tseslint.parser, extraFileExtensions: ['.vue'] },
    },
    rules: {
      'vuejs-accessibility/label-has-for': 'off',
      'vuejs-accessibility/no-autofocus': 'off',
    },
  },
  {
    files: ['shared/src/**'],
    rules: forbidImports([
      ['@maslin/*', '**/solver/**', '**/backend/**', '**/frontend/**'],
      'shared imports no other layer.',
    ]),
  },
  {
    files: ['solver/src/**'],
    rules: forbidImports([
      ['@maslin/backend*', '@maslin/frontend*', '**/backend/**', '**/frontend/**', 'node:*', 'fs', 'path'],
      'solver is pure and imports shared only.',
    ]),
  },
  {
    files: ['solver/src/lp/**'],
    rules: forbidImports([
      ['**/nutrition/**', '**/formulation/**', '**/analysis/**', 'node:*'],
      'lp knows nothing of feed.',
    ]),
  },
  {
    files: ['frontend/src/**'],
    rules: forbidImports([['@maslin/backend*', '**/backend/**'], 'frontend imports shared and solver only.']),
  },
  {
    files: ['backend/src/**'],
    rules: forbidImports(
      [['@maslin/frontend*', '**/frontend/**'], 'backend imports shared and solver only.'],
      models,
    ),
  },
  {
    files: [
      'backend/src/models/**',
      'backend/src/repositories/**',
      'backend/src/database/**',
      'backend/src/migrations/**',
    ],
    rules: forbidImports([
      ['@maslin/frontend*', '**/frontend/**'],
      'backend imports shared and solver only.',
    ]),
  },
  prettier,
)

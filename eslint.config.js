import js from '@eslint/js'
import globals from 'globals'
import vue from 'eslint-plugin-vue'
import prettier from 'eslint-config-prettier'
import typescript from 'typescript-eslint'

const noReach = (patterns) => ({ 'no-restricted-imports': ['error', { patterns }] })

export default typescript.config(
  { ignores: ['dist/**', '.quasar/**', 'node_modules/**', 'shots/**'] },
  js.configs.recommended,
  ...typescript.configs.recommended,
  ...vue.configs['flat/recommended'],
  {
    files: ['**/*.vue'],
    languageOptions: { parserOptions: { parser: typescript.parser } },
  },
  {
    languageOptions: { globals: { ...globals.node, ...globals.browser } },
    rules: {
      'no-undef': 'off',
      '@typescript-eslint/consistent-type-imports': 'error',
      '@typescript-eslint/no-non-null-assertion': 'off',
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_' }],
      'vue/no-v-html': 'error',
      'vue/multi-word-component-names': 'off',
      'no-eval': 'error',
      'no-new-func': 'error',
    },
  },
  {
    files: ['shared/**/*.ts'],
    rules: noReach([
      {
        group: [
          'vue',
          'vue-*',
          'pinia',
          'quasar',
          'express',
          'drizzle-orm*',
          'mysql2*',
          'node:*',
          'fs',
          'path',
          'crypto',
        ],
        message: 'shared/ is pure: no platform, no I/O.',
      },
      { group: ['**/src-server/**', '**/src/**'], message: 'shared/ never reaches back.' },
    ]),
  },
  {
    files: ['shared/{quantities,preferred-values,numerics,circuit,formula,analysis,symbolic,noise,sizing}/**/*.ts'],
    rules: noReach([
      {
        group: ['zod', 'vue', 'vue-*', 'pinia', 'quasar', 'express', 'node:*', 'drizzle-orm*', 'mysql2*'],
        message: 'The engine knows neither zod nor a platform.',
      },
      {
        group: ['**/src-server/**', '**/src/**', '**/contracts/**', '**/stage/**', '**/page-source/**'],
        message: 'The engine never reaches back.',
      },
    ]),
  },
  {
    files: ['src/**/*.{ts,vue}'],
    rules: noReach([
      {
        group: ['**/src-server/**', 'express', 'mysql2*', 'drizzle-orm*'],
        message: 'The client never reaches across.',
      },
    ]),
  },
  {
    files: ['src-server/**/*.ts'],
    rules: noReach([{ group: ['vue', 'vue-*', 'quasar', 'pinia'], message: 'The server never reaches across.' }]),
  },
  prettier,
)

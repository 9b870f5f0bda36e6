import js from '@eslint/js'
import ts from 'typescript-eslint'
import vue from 'eslint-plugin-vue'
import prettier from 'eslint-config-prettier'
import globals from 'globals'

const noClock = [{ selector: "NewExpression[callee.name='Date'][arguments.length=0]", message: 'Pass the clock in.' }]

export default ts.config(
  { ignores: ['**/node_modules/**', '**/.build/**', '**/.data/**', '**/.tmp/**', 'drizzle/**'] },
  js.configs.recommended,
  ...ts.configs.recommended,
  ...vue.configs['flat/recommended'],
  prettier,
  {
    languageOptions: {
      globals: { ...globals.browser, ...globals.node },
      parserOptions: { parser: ts.parser, extraFileExtensions: ['.vue'] },
    },
    rules: {
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_' }],
      '@typescript-eslint/consistent-type-imports': 'error',
      'max-lines': ['warn', { max: 300, skipBlankLines: true, skipComments: true }],
      'vue/component-api-style': ['error', ['script-setup']],
      'vue/block-order': ['error', { order: ['script', 'template', 'style'] }],
      'vue/define-macros-order': 'error',
      'vue/multi-word-component-names': ['error', { ignores: ['App'] }],
      'vue/no-v-html': 'error',
      'vue/require-default-prop': 'off',
      'no-undef': 'off',
    },
  },
  {
    files: ['shared/**/*.ts'],
    rules: {
      'no-restricted-imports': [
        'error',
        { patterns: [{ regex: '^(?![.]{1,2}/|#shared/|zod$|jstat$|@stdlib/|luxon$)', message: 'shared/ is pure.' }] },
      ],
      'no-restricted-properties': [
        'error',
        { object: 'Date', property: 'now', message: 'Pass the clock in.' },
        { object: 'Math', property: 'random', message: 'Pass the random source in.' },
      ],
      'no-restricted-syntax': ['error', ...noClock],
    },
  },
  {
    files: ['server/**/*.ts'],
    ignores: ['server/db/**', 'server/env.ts', 'server/main.ts', 'server/clock.ts'],
    rules: {
      'no-restricted-properties': ['error', { object: 'Date', property: 'now', message: 'Use the injected clock.' }],
      'no-restricted-syntax': ['error', ...noClock],
    },
  },
  { files: ['tests/**', '**/*.mjs', '**/*.cjs'], rules: { 'max-lines': 'off' } },
)

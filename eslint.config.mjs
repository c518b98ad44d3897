import vue from 'eslint-plugin-vue'
import tseslint from 'typescript-eslint'

/**
 * The arrows of the architecture: numerics <- control <- schemas, document <- server, and on the other side
 * schemas, document <- utils <- stores, composables <- components <- pages, layouts, middleware, plugins.
 * Each rule lists what the files of a room may not import.
 */
const rooms = [
  { files: ['shared/numerics/**'], forbid: ['control', 'schemas', 'document', 'server', 'stores', 'composables', 'components', 'pages', 'utils'] },
  { files: ['shared/control/**'], forbid: ['schemas', 'document', 'server', 'stores', 'composables', 'components', 'pages', 'utils'] },
  { files: ['shared/schemas/**', 'shared/document/**'], forbid: ['server', 'stores', 'composables', 'components', 'pages', 'utils'] },
  { files: ['utils/**'], forbid: ['server', 'stores', 'composables', 'components', 'pages'] },
  { files: ['server/**'], forbid: ['stores', 'composables', 'components', 'pages'] },
  { files: ['stores/**', 'composables/**'], forbid: ['server', 'components', 'pages'] },
  { files: ['components/**'], forbid: ['server', 'pages'] },
  { files: ['pages/**', 'layouts/**', 'middleware/**', 'plugins/**'], forbid: ['server'] },
]

const frameworks = ['vue', 'vue-*', 'nuxt', 'nuxt/*', '#imports', '#app', 'pinia', 'konva', 'h3', 'nitropack', 'drizzle-orm', 'better-sqlite3', 'mathjs']

export default tseslint.config(
  { ignores: ['.nuxt/**', '.output/**', 'node_modules/**', 'coverage/**', '.data/**', 'server/database/migrations/**'] },
  ...tseslint.configs.recommended,
  ...vue.configs['flat/recommended'],
  {
    files: ['**/*.vue'],
    languageOptions: { parserOptions: { parser: tseslint.parser } },
  },
  {
    rules: {
      '@typescript-eslint/no-explicit-any': 'error',
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_', caughtErrors: 'none' }],
      'no-undef': 'off',
      'vue/multi-word-component-names': 'off',
      'vue/require-default-prop': 'off',
      'vue/max-attributes-per-line': 'off',
      'vue/singleline-html-element-content-newline': 'off',
      'vue/html-self-closing': 'off',
      'vue/no-v-html': 'error',
      'eqeqeq': 'error',
      'prefer-const': 'error',
    },
  },
  ...rooms.map(({ files, forbid }) => ({
    files: files.flatMap(pattern => [`${pattern}/*.ts`, `${pattern}/*.vue`]),
    rules: {
      'no-restricted-imports': ['error', {
        patterns: [
          {
            regex: `^(~/|@/|~~/|#shared/|(\\.\\./)+)(shared/)?(${forbid.join('|')})(/|$)`,
            message: 'This import points against the arrows of the architecture (DEVELOPERS.md).',
          },
          ...(files[0].startsWith('shared/') || files[0].startsWith('utils/')
            ? [{ group: frameworks, message: 'This room knows no framework.' }]
            : []),
        ],
      }],
    },
  })),
)

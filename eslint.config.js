import js from '@eslint/js'
import vue from 'eslint-plugin-vue'
import tseslint from 'typescript-eslint'

/** Selectors that hold everywhere. */
const everywhere = [
  {
    selector: 'TSAsExpression > TSAsExpression[typeAnnotation.type="TSUnknownKeyword"]',
    message: 'A cast by way of unknown hides a wrong type: validate at the door or mend the type.',
  },
  {
    selector:
      'MemberExpression[object.name=/^(it|test|describe|suite)$/][property.name=/^(only|skip|todo|skipIf|runIf)$/]',
    message: 'Every test runs, every time.',
  },
]

/** Statements go through one file, which always names their type (an untyped select throws with the mariadb driver). */
const oneDoorToSql = [
  {
    selector: 'CallExpression[callee.property.name="query"][callee.object.name=/sequelize|database/i]',
    message: 'Raw statements go through server/models/sql.ts, which always names their type.',
  },
  {
    selector: 'CallExpression[callee.property.name="query"][callee.object.property.name=/sequelize|database/i]',
    message: 'Raw statements go through server/models/sql.ts, which always names their type.',
  },
]

/** Time and chance are arguments in shared: the same arguments give the same values, on both sides and for ever. */
const noClockNoDice = [
  { selector: 'NewExpression[callee.name="Date"][arguments.length=0]', message: 'Time is an argument here.' },
  { selector: 'CallExpression[callee.name="Date"]', message: 'Time is an argument here.' },
  {
    selector: 'CallExpression[callee.object.name="Date"][callee.property.name="now"]',
    message: 'Time is an argument here.',
  },
  {
    selector:
      'CallExpression[callee.object.name="DateTime"][callee.property.name=/^(now|local|utc)$/][arguments.length=0]',
    message: 'Time is an argument here.',
  },
  {
    selector: 'CallExpression[callee.object.name="DateTime"][callee.property.name="now"]',
    message: 'Time is an argument here.',
  },
  {
    selector: 'MemberExpression[object.name="Math"][property.name="random"]',
    message: 'The seed is an argument here.',
  },
  { selector: 'ImportExpression', message: 'shared has no dynamic imports.' },
]

/** Names of the browser and of Node that pure code has no business with. */
const outsideWorld = [
  'window', 'document', 'navigator', 'location', 'history', 'screen', 'localStorage', 'sessionStorage', 'indexedDB',
  'alert', 'fetch', 'XMLHttpRequest', 'WebSocket', 'EventSource', 'requestAnimationFrame', 'HTMLElement', 'Element', 'Node',
  'process', 'Buffer', 'global', 'require', '__dirname', '__filename', 'performance', 'crypto', 'console',
  'setTimeout', 'setInterval', 'setImmediate', 'queueMicrotask', 'Worker',
] // prettier-ignore

/** mathjs can run text as a program; the text of a person never gets there. */
const noTextAsProgram = {
  paths: [
    {
      name: 'mathjs',
      importNames: ['evaluate', 'parse', 'compile', 'parser'],
      message: 'No text is run as a program.',
    },
  ],
}

export default tseslint.config(
  { ignores: ['node_modules/', 'dist/', 'var/', 'coverage/'] },
  { linterOptions: { noInlineConfig: true, reportUnusedDisableDirectives: 'error' } },
  js.configs.recommended,
  ...tseslint.configs.recommended,
  ...vue.configs['flat/essential'],
  {
    languageOptions: { ecmaVersion: 2023, sourceType: 'module' },
    rules: {
      // TypeScript knows the names that exist; the rule would only repeat it.
      'no-undef': 'off',
      eqeqeq: ['error', 'always', { null: 'ignore' }],
      'no-eval': 'error',
      'no-implied-eval': 'error',
      'no-new-func': 'error',
      'no-var': 'error',
      'prefer-const': 'error',
      'object-shorthand': 'error',
      'no-warning-comments': ['error', { terms: ['todo', 'fixme', 'xxx', 'hack'], location: 'anywhere' }],
      'max-lines': ['error', { max: 300, skipBlankLines: true, skipComments: true }],
      'no-restricted-imports': ['error', noTextAsProgram],
      'no-restricted-syntax': ['error', ...everywhere, ...oneDoorToSql],
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_' }],
      '@typescript-eslint/consistent-type-imports': ['error', { fixStyle: 'separate-type-imports' }],
    },
  },
  { files: ['**/*.vue'], languageOptions: { parserOptions: { parser: tseslint.parser } } },
  { files: ['src/pages/**', 'src/layouts/**', 'src/App.vue'], rules: { 'vue/multi-word-component-names': 'off' } },
  {
    files: ['src/**/*.vue'],
    rules: { 'vue/no-v-html': 'error', 'vue/block-lang': ['error', { script: { lang: 'ts' } }] },
  },
  {
    files: ['shared/**'],
    rules: {
      'no-restricted-syntax': ['error', ...everywhere, ...noClockNoDice],
      'no-restricted-globals': ['error', ...outsideWorld.map((name) => ({ name, message: 'shared is pure.' }))],
    },
  },
  {
    // A promise that nobody waits for takes its failure with it.
    files: ['server/**/*.ts', 'simulator/**/*.ts'],
    languageOptions: { parserOptions: { projectService: true, tsconfigRootDir: import.meta.dirname } },
    rules: { '@typescript-eslint/no-floating-promises': 'error' },
  },
  { files: ['server/**'], ignores: ['server/setup/**', 'server/commands/**'], rules: { 'no-console': 'error' } },
  // One table, however long.
  { files: ['.dependency-cruiser.cjs'], rules: { 'max-lines': 'off' } },
  { files: ['server/models/sql.ts'], rules: { 'no-restricted-syntax': ['error', ...everywhere] } },
)

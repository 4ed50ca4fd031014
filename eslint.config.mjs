import { createTypeScriptImportResolver } from 'eslint-import-resolver-typescript'
import importX from 'eslint-plugin-import-x'
import withNuxt from './.nuxt/eslint.config.mjs'

const app = ['./app.vue', './error.vue', './pages', './layouts', './components', './composables', './stores', './middleware', './plugins', './assets']

/** Which way imports point; each row is a sentence a newcomer can act on. */
const zones = [
  { target: './shared', from: ['./server', './scripts', './tests', ...app], message: 'shared/ is pure: it imports only from shared/.' },
  { target: './shared/domain', from: './shared/contract', message: 'The domain does not know the shape of the API.' },
  { target: './shared/domain/units', from: ['./shared/domain/uncertainty', './shared/domain/geometry', './shared/domain/airflow', './shared/domain/rubric'], message: 'units is the bottom of the domain.' },
  { target: './shared/domain/uncertainty', from: ['./shared/domain/geometry', './shared/domain/airflow', './shared/domain/rubric'], message: 'uncertainty knows only units.' },
  { target: './shared/domain/geometry', from: ['./shared/domain/airflow', './shared/domain/rubric'], message: 'geometry knows only units and uncertainty.' },
  { target: './shared/domain/airflow', from: './shared/domain/rubric', message: 'airflow does not judge; rubric does.' },
  { target: './shared/domain/money', from: ['./shared/domain'], except: ['./money'], message: 'money is reckoned by itself: it knows nothing of iron.' },
  { target: ['./shared/domain/units', './shared/domain/uncertainty', './shared/domain/geometry', './shared/domain/airflow', './shared/domain/rubric'], from: './shared/domain/money', message: 'What is measured and judged knows nothing of money.' },
  { target: ['./shared/contract', './shared/domain'], from: './shared/lesson', message: 'shared/lesson carries an editor\'s grammar; what every page loads does not.' },
  { target: app, from: ['./server', './scripts'], message: 'Pages reach the server through /api, and share types through shared/contract.' },
  { target: './server', from: [...app, './scripts', './tests'], message: 'The server does not import the Vue side, scripts or tests.' },
  { target: './server/api', from: ['./server/db', './server/jobs', './server/adapters'], message: 'A route calls a service; it does not query.' },
  { target: './server/services', from: ['./server/api', './server/jobs'], message: 'A service does not know who calls it; enqueue() is in server/utils.' },
  { target: './server/db', from: ['./server/api', './server/jobs', './server/services', './server/adapters', './server/utils'], message: 'server/db is the bottom of the server.' },
  { target: './server/db/migrations', from: ['./server', './shared'], except: ['./db/migrations'], message: 'A migration is frozen: it imports nothing of ours.' },
  { target: './server/adapters', from: ['./server/api', './server/db', './server/jobs', './server/services', './server/utils'], message: 'An adapter speaks to the outside world and knows nothing of the school.' },
  { target: './components', from: ['./stores', './composables', './pages', './layouts'], message: 'A component gets props and emits events.' },
  { target: './composables', from: ['./components', './pages', './layouts'], message: 'A composable does not draw.' },
  { target: './stores', from: ['./components', './composables', './pages', './layouts'], message: 'A store knows only shared/.' },
]

export default withNuxt(
  {
    plugins: { 'import-x': importX },
    settings: {
      'import-x/resolver-next': [createTypeScriptImportResolver({ alwaysTryTypes: true, project: ['./.nuxt/tsconfig.app.json', './.nuxt/tsconfig.server.json', './.nuxt/tsconfig.shared.json', './.nuxt/tsconfig.node.json', './tests/tsconfig.json'] })],
      'import-x/parsers': { '@typescript-eslint/parser': ['.ts'], 'vue-eslint-parser': ['.vue'] },
    },
    rules: {
      'import-x/no-restricted-paths': ['error', { zones }],
      'import-x/no-cycle': ['error', { maxDepth: 8 }],
      'import-x/no-unresolved': ['error', { ignore: ['^#', '\\.css$'] }],
      '@typescript-eslint/no-explicit-any': 'error',
      'vue/multi-word-component-names': 'off',
    },
  },
  {
    files: ['shared/**/*.ts'],
    rules: {
      'no-restricted-imports': ['error', { patterns: [{ group: ['node:*', 'vue', 'pinia', 'h3', '@mikro-orm/*', '#app', '#imports'], message: 'shared/ runs everywhere: no platform, no framework.' }] }],
      'no-restricted-globals': ['error', 'process', 'fetch', 'window', 'document'],
      'no-restricted-syntax': ['error',
        { selector: 'CallExpression[callee.object.name="Date"][callee.property.name="now"]', message: 'Pass the time in.' },
        { selector: 'NewExpression[callee.name="Date"][arguments.length=0]', message: 'Pass the time in.' },
        { selector: 'CallExpression[callee.object.name="Math"][callee.property.name="random"]', message: 'Pass chance in.' },
      ],
    },
  },
)

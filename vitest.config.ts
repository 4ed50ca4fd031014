import { fileURLToPath } from 'node:url'
import { defineVitestProject } from '@nuxt/test-utils/config'
import { defineConfig, type TestProjectConfiguration } from 'vitest/config'

const root = fileURLToPath(new URL('.', import.meta.url))

// Nuxt reads this when it loads, and stops without it.
process.env.AUTH_ORIGIN ??= 'http://127.0.0.1:3000/api/auth'

const alias = {
  '#shared': `${root}shared`,
  '#server': `${root}server`,
  '~': root.replace(/\/$/, ''),
}

const plain = (name: string, more: Record<string, unknown> = {}): TestProjectConfiguration => ({
  root,
  resolve: { alias },
  test: { name, root, environment: 'node', include: [`tests/${name}/**/*.test.ts`], ...more },
})

/** Loading Nuxt takes four seconds, so only a run that may hold app tests pays for it. */
const wantsApp = (): boolean => {
  const args = process.argv.slice(2)
  const projects = args.flatMap((arg, at) => arg === '--project' ? [args[at + 1] ?? ''] : arg.startsWith('--project=') ? [arg.slice(10)] : [])
  if (projects.length > 0) return projects.some(name => name.includes('app') || name.includes('*'))
  const files = args.filter(arg => arg.startsWith('tests/') || arg.startsWith('./tests/'))
  return files.length === 0 || files.some(file => file.includes('tests/app'))
}

const app = async (): Promise<TestProjectConfiguration[]> => [
  await defineVitestProject({
    test: {
      name: 'app',
      include: ['tests/app/**/*.test.ts'],
      setupFiles: ['tests/app/setup.ts'],
      environment: 'nuxt',
      environmentOptions: { nuxt: { rootDir: root, domEnvironment: 'happy-dom' } },
    },
  }) as TestProjectConfiguration,
]

export default defineConfig(async () => ({
  test: {
    projects: [
      plain('domain'),
      // Each file gets a database of its own, so files may run side by side; two cores bear two. A number of workers of its own asks for a turn of its own.
      plain('server', { globalSetup: ['tests/server/global-setup.ts'], testTimeout: 30_000, hookTimeout: 60_000, maxWorkers: 2, sequence: { groupOrder: 1 } }),
      plain('meta', { testTimeout: 30_000 }),
      ...(wantsApp() ? await app() : []),
    ],
    passWithNoTests: true,
  },
}))

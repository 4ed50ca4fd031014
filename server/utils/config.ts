import { z } from 'zod'

const url = z.string().url()

const schema = z.object({
  AUTH_ORIGIN: url.refine(value => new URL(value).pathname.replace(/\/$/, '') === '/api/auth', 'must end in /api/auth'),
  NUXT_AUTH_SECRET: z.string().min(32, 'must have at least 32 characters'),
  NUXT_DATABASE_URL: z.string().regex(/^postgres(ql)?:\/\//, 'must be a postgresql:// address'),
  NUXT_ROLE: z.enum(['web', 'worker', 'both']).default('both'),
  NUXT_MIGRATE_ON_START: z.enum(['true', 'false']).default('true').transform(value => value === 'true'),
  NUXT_STORAGE_ENDPOINT: url,
  NUXT_STORAGE_PUBLIC_ENDPOINT: url,
  NUXT_STORAGE_REGION: z.string().min(1).default('eu-west-1'),
  NUXT_STORAGE_BUCKET: z.string().min(3),
  NUXT_STORAGE_ACCESS_KEY: z.string().min(1),
  NUXT_STORAGE_SECRET_KEY: z.string().min(1),
  NUXT_MAIL_URL: z.string().regex(/^smtps?:\/\//, 'must be an smtp:// address'),
  NUXT_MAIL_FROM: z.string().min(3),
  NUXT_PAY_KEY: z.string().min(8),
  NUXT_PAY_WEBHOOK_SECRET: z.string().min(8),
  NUXT_PAY_ENDPOINT: z.union([z.literal(''), url]).optional(),
  NUXT_PUBLIC_URL: url,
})

export interface Config {
  authOrigin: string
  authSecret: string
  databaseUrl: string
  role: 'web' | 'worker' | 'both'
  migrateOnStart: boolean
  storage: { endpoint: string, publicEndpoint: string, region: string, bucket: string, accessKey: string, secretKey: string }
  mail: { url: string, from: string }
  /** `endpoint`: null for the card processor's own address. */
  pay: { key: string, webhookSecret: string, endpoint: string | null }
  publicUrl: string
}

/**
 * What the environment says, checked once. Every name is listed in DEVELOPERS.md.
 * @throws {Error} naming each variable that is missing or wrong
 */
export function readConfig(env: NodeJS.ProcessEnv): Config {
  const read = schema.safeParse(env)
  if (!read.success) {
    const lines = read.error.issues.map(issue => `  ${issue.path.join('.')}: ${issue.message}`)
    throw new Error(`The configuration is not complete:\n${lines.join('\n')}`)
  }
  const value = read.data
  return {
    authOrigin: value.AUTH_ORIGIN,
    authSecret: value.NUXT_AUTH_SECRET,
    databaseUrl: value.NUXT_DATABASE_URL,
    role: value.NUXT_ROLE,
    migrateOnStart: value.NUXT_MIGRATE_ON_START,
    storage: {
      endpoint: value.NUXT_STORAGE_ENDPOINT,
      publicEndpoint: value.NUXT_STORAGE_PUBLIC_ENDPOINT,
      region: value.NUXT_STORAGE_REGION,
      bucket: value.NUXT_STORAGE_BUCKET,
      accessKey: value.NUXT_STORAGE_ACCESS_KEY,
      secretKey: value.NUXT_STORAGE_SECRET_KEY,
    },
    mail: { url: value.NUXT_MAIL_URL, from: value.NUXT_MAIL_FROM },
    pay: { key: value.NUXT_PAY_KEY, webhookSecret: value.NUXT_PAY_WEBHOOK_SECRET, endpoint: value.NUXT_PAY_ENDPOINT || null },
    publicUrl: value.NUXT_PUBLIC_URL.replace(/\/$/, ''),
  }
}

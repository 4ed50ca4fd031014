import { hash, verify } from '@node-rs/argon2'

/** OWASP's second argon2id profile: 19 MiB, two passes (value from memory). argon2id is the package's default. */
const cost = { memoryCost: 19_456, timeCost: 2, parallelism: 1 }

/** Hash of no password at all: an unknown address costs the same work as a known one. */
const nobody = '$argon2id$v=19$m=19456,t=2,p=1$c29tZXNhbHRzb21lc2FsdA$+iYLS5MvhlBtFZ6OKkFcU7HZYwzj/qVQv0sVVgGVuUo'

/** At most two hashes at once, so that a burst of tries cannot take every core. */
function atMost(limit: number) {
  let running = 0
  const waiting: (() => void)[] = []
  return async function run<T>(work: () => Promise<T>): Promise<T> {
    if (running >= limit) await new Promise<void>(resolve => waiting.push(resolve))
    running++
    try {
      return await work()
    }
    finally {
      running--
      waiting.shift()?.()
    }
  }
}
const gate = atMost(2)

export function hashPassword(password: string): Promise<string> {
  return gate(() => hash(password, cost))
}

/** Whether the password is right; the same work whether or not there is anybody to compare with. */
export async function checkPassword(passwordHash: string | null, password: string): Promise<boolean> {
  const right = await gate(() => verify(passwordHash ?? nobody, password).catch(() => false))
  return right && passwordHash !== null
}

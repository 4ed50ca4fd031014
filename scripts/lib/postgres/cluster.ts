/** One PostgreSQL cluster of our own: where it is, where it answers, how careful it is. */
export type Cluster = {
  /** As asked for, `.data/postgres`; may be a link to a folder the server's user can reach. */
  dir: string
  port: number
  /** Name and password of the superuser, for these scripts only. */
  admin: { name: string, password: string }
  /** False for tests: a power cut may cost the cluster, and everything is faster. */
  durable: boolean
}

export const clusterHost = '127.0.0.1'

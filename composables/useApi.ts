import { toFailure, type Failure } from '#shared/contract/failure'

export type ApiResult<T> = { ok: true, value: T, status: number } | { ok: false, failure: Failure }

/** One way to call /api from a screen: an answer or a failure with a sentence, never a throw. */
export function useApi() {
  const call = $fetch.raw as (path: string, options: Record<string, unknown>) => Promise<{ _data: unknown, status: number }>

  async function send<T>(method: 'GET' | 'POST' | 'DELETE', path: string, body?: unknown, key?: string): Promise<ApiResult<T>> {
    try {
      const answer = await call(path, { method, body: body === undefined && method === 'POST' ? {} : body, headers: key ? { 'idempotency-key': key } : {}, retry: false })
      return { ok: true, value: answer._data as T, status: answer.status }
    }
    catch (thrown) {
      return { ok: false, failure: toFailure(thrown) }
    }
  }

  return {
    get: <T>(path: string) => send<T>('GET', path),
    /** `key` makes the call safe to repeat: keep it with the draft. */
    post: <T>(path: string, body: unknown = {}, key?: string) => send<T>('POST', path, body, key),
    remove: <T>(path: string) => send<T>('DELETE', path),
  }
}

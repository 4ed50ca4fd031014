import { partBytes, type SignedPart, type SignedPut } from '#server/adapters/storage/storage'
import type { Upload } from '#server/db/entities/Upload'
import type { App } from '#server/utils/app'

export interface SignedUpload {
  id: string
  state: Upload['state']
  /** One signed request, for files up to 16 MB. */
  put?: SignedPut
  /** Signed requests for the parts of a larger file, how large each but the last is, and what storage has of them. */
  parts?: SignedPart[]
  partBytes?: number
  have?: { n: number, etag: string }[]
}

/** Fresh signed addresses for what is still to be sent; none once it is received. */
export async function signUpload(app: Pick<App, 'storage'>, upload: Upload): Promise<SignedUpload> {
  const { id, state, key, bytes, contentType, sha256, multipartId } = upload
  if (state !== 'open') return { id, state }
  if (!multipartId) return { id, state, put: await app.storage.signPut({ key, bytes, contentType, sha256 }) }
  const [parts, there] = await Promise.all([app.storage.signParts({ key, multipartId, bytes }), app.storage.partsThere({ key, multipartId })])
  return { id, state, parts, partBytes, have: there.map(({ n, etag }) => ({ n, etag })) }
}

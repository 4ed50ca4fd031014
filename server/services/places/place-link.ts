import { createHmac, timingSafeEqual } from 'node:crypto'
import type { App } from '#server/utils/app'

/** What a link needs to know of a place. */
interface LinkedPlace { id: string, linkVersion: number }

const idBytes = 16
const versionBytes = 4
const macBytes = 16
const uuid = /^([0-9a-f]{8})([0-9a-f]{4})([0-9a-f]{4})([0-9a-f]{4})([0-9a-f]{12})$/

/** HMAC-SHA256 (RFC 2104) of what the token says, cut to 128 bits; the words keep it apart from every other use of the secret. */
function macOf(app: Pick<App, 'config'>, said: Uint8Array): Buffer {
  return createHmac('sha256', app.config.authSecret).update('place-link').update(said).digest().subarray(0, macBytes)
}

/**
 * The secret part of a place's mailed link: whoever has it may do what the asker may do.
 *
 * Nothing is kept: the token is the place's id and link version, and a keyed hash of both, as base64url. Raising `linkVersion`
 * ends every link that was given out; comparing the version is the reader's part.
 */
export function placeToken(app: Pick<App, 'config'>, place: LinkedPlace): string {
  const said = Buffer.alloc(idBytes + versionBytes)
  said.write(place.id.replaceAll('-', ''), 0, idBytes, 'hex')
  said.writeUInt32BE(place.linkVersion, idBytes)
  return Buffer.concat([said, macOf(app, said)]).toString('base64url')
}

/** Address of the page that shows a place to whoever holds its link. */
export function placeLink(app: Pick<App, 'config'>, place: LinkedPlace): string {
  return `${app.config.publicUrl}/place/${placeToken(app, place)}`
}

/** What a token says, or null when it is not one of ours. Compared in the same time whatever is wrong with it. */
export function readPlaceToken(app: Pick<App, 'config'>, token: string): { placeId: string, linkVersion: number } | null {
  const bytes = Buffer.from(token, 'base64url')
  // base64url readers skip what they do not know: only the one way of writing it is ours.
  if (bytes.length !== idBytes + versionBytes + macBytes || bytes.toString('base64url') !== token) return null
  const said = bytes.subarray(0, idBytes + versionBytes)
  if (!timingSafeEqual(bytes.subarray(idBytes + versionBytes), macOf(app, said))) return null
  return { placeId: said.subarray(0, idBytes).toString('hex').replace(uuid, '$1-$2-$3-$4-$5'), linkVersion: said.readUInt32BE(idBytes) }
}

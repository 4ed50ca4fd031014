import { createHash, randomUUID } from 'node:crypto'
import { open, rm } from 'node:fs/promises'
import type { IncomingMessage } from 'node:http'
import { join } from 'node:path'
import { crc32 } from 'node:zlib'
import { S3Error } from './s3-error'

export type Received = { blob: string, bytes: number, md5: string, sha256: string }

/**
 * Takes a request's body to a file of its own, on the disk before this returns, and holds it to every checksum the sender gave.
 * Nothing stays behind when it does not match or stops half-way.
 *
 * @param payloadSha256 what the signature says the body is; null when it leaves it open
 * @throws {S3Error} BadDigest, XAmzContentSHA256Mismatch, IncompleteBody, MissingContentLength, InvalidRequest
 */
export async function receiveBody(request: IncomingMessage, dir: string, payloadSha256: string | null): Promise<Received> {
  const announced = request.headers['content-length']
  if (announced === undefined) throw new S3Error(411, 'MissingContentLength', 'You must provide the Content-Length HTTP header.')
  for (const name of Object.keys(request.headers)) {
    if (/^x-amz-checksum-(?!sha256$|crc32$|algorithm$|type$)/.test(name)) throw new S3Error(501, 'NotImplemented', `This stand-in does not check ${name}.`)
  }
  const blob = randomUUID()
  const path = join(dir, blob)
  const md5 = createHash('md5')
  const sha256 = createHash('sha256')
  let crc = 0
  let bytes = 0
  const file = await open(path, 'wx')
  try {
    try {
      for await (const chunk of request as AsyncIterable<Buffer>) {
        md5.update(chunk)
        sha256.update(chunk)
        crc = crc32(chunk, crc)
        bytes += chunk.length
        await file.writeFile(chunk)
      }
    }
    catch {
      throw new S3Error(400, 'IncompleteBody', 'You did not provide the number of bytes specified by the Content-Length HTTP header.')
    }
    if (bytes !== Number(announced)) throw new S3Error(400, 'IncompleteBody', 'You did not provide the number of bytes specified by the Content-Length HTTP header.')
    const got = { md5: md5.digest(), sha256: sha256.digest() }
    if (payloadSha256 !== null && payloadSha256 !== got.sha256.toString('hex')) throw new S3Error(400, 'XAmzContentSHA256Mismatch', 'The provided \'x-amz-content-sha256\' header does not match what was computed.')
    const crcBytes = Buffer.alloc(4)
    crcBytes.writeUInt32BE(crc)
    check(request.headers['x-amz-checksum-sha256'], got.sha256, 'SHA256')
    check(request.headers['x-amz-checksum-crc32'], crcBytes, 'CRC32')
    check(request.headers['content-md5'], got.md5, 'Content-MD5')
    await file.sync()
    return { blob, bytes, md5: got.md5.toString('hex'), sha256: got.sha256.toString('base64') }
  }
  catch (thrown) {
    await rm(path, { force: true })
    throw thrown
  }
  finally {
    await file.close()
  }
}

function check(given: string | string[] | undefined, computed: Buffer, name: string): void {
  if (given === undefined) return
  if (Buffer.from(String(given), 'base64').length !== computed.length) throw new S3Error(400, 'InvalidRequest', `Value for the ${name} checksum is not valid.`)
  if (given !== computed.toString('base64')) throw new S3Error(400, 'BadDigest', `The ${name} you specified did not match the calculated checksum.`)
}

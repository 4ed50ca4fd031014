import { randomUUID } from 'node:crypto'
import { createServer, type IncomingMessage, type ServerResponse } from 'node:http'
import type { AddressInfo } from 'node:net'
import { setTimeout as sleep } from 'node:timers/promises'
import { answerFaults, type Faults } from '../faults'
import { answerCors } from './cors'
import { listObjects } from './list-objects'
import { ObjectStore } from './object-store'
import { readObject } from './read-object'
import { S3Error } from './s3-error'
import { verifySignature, type Credentials } from './verify-signature'
import { completeMultipart, copyObject, listParts, putObject, putPart, startMultipart, type Answer } from './write-object'
import { xml } from './xml'

export type S3Faults = Faults<'failNext' | 'cutNext' | 'slowMs'>
export type S3StandIn = { url: string, faults: S3Faults, close: () => Promise<void> }
export type S3Options = {
  dir: string
  credentials: Credentials
  /** Made if it is not there. */
  bucket: string
  /** Pages of these origins may read and write through signed addresses. */
  origins: readonly string[]
  host?: string
  /** 0 takes any that is free. */
  port: number
  now?: () => Date
}

/**
 * A stand-in for S3-compatible storage on this machine: path-style addresses, one pair of keys, files on disk.
 * What it does not know it refuses with NotImplemented rather than guess.
 */
export async function startS3({ dir, credentials, bucket, origins, host = '127.0.0.1', port, now = () => new Date() }: S3Options): Promise<S3StandIn> {
  const store = new ObjectStore(dir)
  if (!store.has(bucket)) store.makeBucket(bucket)
  const faults: S3Faults = { failNext: 0, cutNext: 0, slowMs: 0 }

  const handle = async (request: IncomingMessage, response: ServerResponse): Promise<void> => {
    if (await answerFaults(faults, request, response)) return
    const requestId = randomUUID()
    // A destroyed request forgets its socket.
    const { socket } = request
    response.setHeader('x-amz-request-id', requestId)
    const url = new URL(request.url ?? '/', 'http://stand-in')
    try {
      if (answerCors(request, response, origins)) return
      if (faults.slowMs > 0) await sleep(faults.slowMs)
      if (faults.failNext > 0) {
        faults.failNext--
        throw new S3Error(503, 'SlowDown', 'Please reduce your request rate.')
      }
      const cut = faults.cutNext > 0
      if (cut) faults.cutNext--
      if (cut && request.method === 'PUT') {
        // Half of the body is taken, and then the line is dead.
        const half = Number(request.headers['content-length'] ?? 0) / 2
        let bytes = 0
        for await (const chunk of request as AsyncIterable<Buffer>) if ((bytes += chunk.length) >= half) break
        socket.destroy()
        return
      }
      const answer = await route(request, response, url, cut)
      if (answer) response.writeHead(answer.status, { ...(answer.body ? { 'content-type': 'application/xml' } : {}), 'content-length': String(Buffer.byteLength(answer.body ?? '')), ...answer.headers }).end(answer.body)
    }
    catch (thrown) {
      const error = thrown instanceof S3Error ? thrown : new S3Error(500, 'InternalError', 'We encountered an internal error. Please try again.')
      if (!(thrown instanceof S3Error) && !socket.destroyed) console.error('storage stand-in:', thrown)
      if (response.headersSent || socket.destroyed) {
        response.destroy()
        return
      }
      const body = request.method === 'HEAD' ? '' : error.toXml(url.pathname, requestId)
      // What is still coming in is not read: the line is closed behind the answer.
      if (!request.complete) response.setHeader('connection', 'close')
      response.writeHead(error.status, { 'content-type': 'application/xml', ...error.headers }).end(body)
      request.resume()
    }
  }

  const route = async (request: IncomingMessage, response: ServerResponse, url: URL, cut: boolean): Promise<Answer | null> => {
    let path: string
    try {
      path = decodeURIComponent(url.pathname.slice(1))
    }
    catch {
      throw new S3Error(400, 'InvalidURI', 'Couldn\'t parse the specified URI.')
    }
    const slash = path.indexOf('/')
    const target = { bucket: slash < 0 ? path : path.slice(0, slash), key: slash < 0 ? '' : path.slice(slash + 1) }
    const verified = verifySignature(request, url, credentials, now())
    const query = url.searchParams
    const method = request.method ?? ''
    if (Buffer.byteLength(target.key) > 1024) throw new S3Error(400, 'KeyTooLongError', 'Your key is too long')

    if (target.key === '') {
      if (method === 'PUT') {
        store.makeBucket(target.bucket)
        return { status: 200, headers: { location: `/${target.bucket}` } }
      }
      if (!store.has(target.bucket)) throw new S3Error(404, 'NoSuchBucket', 'The specified bucket does not exist')
      if (method === 'HEAD') return { status: 200 }
      if (method === 'GET' && query.has('location')) return { status: 200, body: xml('LocationConstraint', '') }
      if (method === 'GET' && query.get('list-type') === '2') return listObjects(store, target.bucket, query)
      throw new S3Error(501, 'NotImplemented', 'A header or query you provided implies functionality that is not implemented.')
    }
    if (!store.has(target.bucket)) throw new S3Error(404, 'NoSuchBucket', 'The specified bucket does not exist')

    if (query.has('uploadId')) {
      if (method === 'PUT') return putPart(request, store, target, query, verified)
      if (method === 'GET') return listParts(store, target, query)
      if (method === 'POST') return completeMultipart(request, store, target, query, now())
      if (method === 'DELETE') {
        store.multipart(target.bucket, target.key, query.get('uploadId') ?? '')
        store.endMultipart(query.get('uploadId') ?? '')
        return { status: 204 }
      }
    }
    if (method === 'POST' && query.has('uploads')) return startMultipart(request, store, target)
    for (const name of ['acl', 'tagging', 'versioning', 'versionId', 'retention', 'legal-hold', 'attributes']) {
      if (query.has(name)) throw new S3Error(501, 'NotImplemented', `This stand-in does not know ?${name}.`)
    }
    if (method === 'PUT') return request.headers['x-amz-copy-source'] ? copyObject(request, store, target, now()) : putObject(request, store, target, verified, now())
    if (method === 'GET' || method === 'HEAD') {
      await readObject(request, response, url, store, store.get(target.bucket, target.key), cut)
      return null
    }
    if (method === 'DELETE') {
      store.remove(target.bucket, target.key)
      return { status: 204 }
    }
    throw new S3Error(405, 'MethodNotAllowed', 'The specified method is not allowed against this resource.')
  }

  const server = createServer((request, response) => void handle(request, response))
  await new Promise<void>((resolve, reject) => {
    server.once('error', reject)
    server.listen(port, host, resolve)
  })
  const address = server.address() as AddressInfo
  return {
    url: `http://${host}:${address.port}`,
    faults,
    close: () => new Promise((resolve) => {
      server.close(() => resolve())
      server.closeAllConnections()
    }),
  }
}

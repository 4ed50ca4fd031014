import { createServer, type IncomingMessage, type ServerResponse } from 'node:http'
import type { AddressInfo, Socket } from 'node:net'
import { buffer } from 'node:stream/consumers'
import { SMTPServer } from 'smtp-server'
import { answerFaults, type Faults } from '../faults'
import { Inbox } from './inbox'
import { inboxPage } from './inbox-page'

/** `laterNext`: 451 before the message is kept. `dropAckNext`: it is kept, and the line goes dead before we say so. */
export type MailFaults = Faults<'laterNext' | 'dropAckNext'>
export type MailStandIn = { smtpUrl: string, pageUrl: string, inbox: Inbox, faults: MailFaults, close: () => Promise<void> }
export type MailOptions = {
  dir: string
  host?: string
  /** 0 takes any that is free. */
  smtpPort: number
  pagePort: number
  now?: () => Date
}

const largestMessage = 10 * 1024 ** 2

const smtpError = (responseCode: number, message: string) => Object.assign(new Error(message), { responseCode })

/** A stand-in for a mail provider on this machine: takes everything by SMTP, delivers nothing, shows it on a page and as JSON. */
export async function startMail({ dir, host = '127.0.0.1', smtpPort, pagePort, now = () => new Date() }: MailOptions): Promise<MailStandIn> {
  const inbox = new Inbox(dir)
  const faults: MailFaults = { laterNext: 0, dropAckNext: 0 }

  const smtp = new SMTPServer({
    disabledCommands: ['STARTTLS'],
    authOptional: true,
    disableReverseLookup: true,
    closeTimeout: 500,
    size: largestMessage,
    onAuth: (_auth, _session, done) => done(null, { user: 'anybody' }),
    onRcptTo(address, _session, done) {
      // For tests of what happens to an address that does not exist.
      if (/@refused\.example$/i.test(address.address)) return done(smtpError(550, 'No such mailbox'))
      done()
    },
    onData(stream, session, done) {
      void (async () => {
        const raw = await buffer(stream)
        if (stream.sizeExceeded) throw smtpError(552, 'Message too large')
        if (faults.laterNext > 0) {
          faults.laterNext--
          throw smtpError(451, 'Try again later')
        }
        const { mailFrom, rcptTo } = session.envelope
        await inbox.keep(raw, { from: mailFrom ? mailFrom.address : '', to: rcptTo.map(one => one.address) }, now())
        if (faults.dropAckNext > 0) {
          faults.dropAckNext--
          // smtp-server gives no handle on its socket; its own list of connections has it.
          for (const connection of smtp.connections as Set<{ id: string, _socket: Socket }>) if (connection.id === session.id) connection._socket.destroy()
          return
        }
        done()
      })().catch((thrown: Error) => done(thrown))
    },
  })
  // A client that goes away in the middle is what some tests do.
  smtp.on('error', () => {})

  const page = createServer((request, response) => void answer(inbox, faults, request, response))
  const listen = (server: SMTPServer | typeof page, port: number) => new Promise<void>((resolve, reject) => {
    server.once('error', reject)
    server.listen(port, host, () => resolve())
  })
  await listen(smtp, smtpPort)
  try {
    await listen(page, pagePort)
  }
  catch (thrown) {
    smtp.close()
    throw thrown
  }
  return {
    smtpUrl: `smtp://${host}:${(smtp.server.address() as AddressInfo).port}`,
    pageUrl: `http://${host}:${(page.address() as AddressInfo).port}`,
    inbox,
    faults,
    async close() {
      await new Promise<void>(resolve => smtp.close(() => resolve()))
      page.closeAllConnections()
      await new Promise<void>(resolve => page.close(() => resolve()))
    },
  }
}

async function answer(inbox: Inbox, faults: MailFaults, request: IncomingMessage, response: ServerResponse): Promise<void> {
  if (await answerFaults(faults, request, response)) return
  const url = new URL(request.url ?? '/', 'http://stand-in')
  const send = (status: number, type: string, body: string | Buffer) => response.writeHead(status, {
    'content-type': type,
    'x-content-type-options': 'nosniff',
    'content-security-policy': 'default-src \'none\'; style-src \'unsafe-inline\'; img-src data:; frame-src \'self\'',
  }).end(body)
  const json = (status: number, body: unknown) => send(status, 'application/json', JSON.stringify(body))
  const [, id, ending] = /^\/(?:api\/)?messages\/(\d+)(\.eml)?$/.exec(url.pathname) ?? []
  const message = id === undefined ? undefined : inbox.find(id)

  if (url.pathname === '/api/messages' && request.method === 'DELETE') {
    inbox.clear()
    response.writeHead(204).end()
  }
  else if (request.method !== 'GET') json(405, { error: 'GET, or DELETE of /api/messages' })
  else if (url.pathname === '/api/messages') json(200, { items: inbox.list({ to: url.searchParams.get('to') ?? undefined, after: url.searchParams.get('after') ?? undefined }) })
  else if (url.pathname === '/') send(200, 'text/html; charset=utf-8', inboxPage(inbox.list({}), undefined))
  else if (!message) json(404, { error: 'no such message' })
  else if (ending) send(200, 'text/plain; charset=utf-8', inbox.raw(message.id) ?? '')
  else if (url.pathname.startsWith('/api/')) json(200, message)
  else send(200, 'text/html; charset=utf-8', inboxPage(inbox.list({}), message))
}

import type { Message } from './inbox'

const escape = (text: string) => text.replace(/[&<>"']/g, character => `&#${character.charCodeAt(0)};`)

/** The inbox as one plain page: what came, newest first, and the message that is open. */
export function inboxPage(messages: readonly Message[], open: Message | undefined): string {
  const rows = [...messages].reverse().map(message => `<tr${message === open ? ' aria-current="true"' : ''}>
    <td>${escape(message.receivedAt.replace('T', ' ').slice(0, 19))}</td><td>${escape(message.to.join(', '))}</td>
    <td><a href="/messages/${message.id}">${escape(message.subject || '(no subject)')}</a></td></tr>`).join('\n')
  // The message's own markup gets a frame in which nothing runs and nothing is fetched.
  const shown = open
    ? `<h2>${escape(open.subject)}</h2><p>From ${escape(open.from)} to ${escape(open.to.join(', '))} · <a href="/messages/${open.id}.eml">as it came</a></p>
      <iframe title="The message" sandbox srcdoc="${escape(open.html || `<pre>${escape(open.text)}</pre>`)}"></iframe>
      <h3>As plain text</h3><pre>${escape(open.text)}</pre>`
    : ''
  return `<!doctype html><html lang="en"><head><meta charset="utf-8"><title>Mail on this machine</title><meta name="viewport" content="width=device-width">
<style>body{font:16px/1.5 system-ui,sans-serif;margin:2rem;max-width:70rem}table{border-collapse:collapse;width:100%}td,th{text-align:left;padding:.4rem .8rem .4rem 0;border-bottom:1px solid #ccc;vertical-align:top}
tr[aria-current]{background:#eef}iframe{width:100%;height:36rem;border:1px solid #ccc}pre{white-space:pre-wrap}</style></head>
<body><h1>Mail on this machine</h1><p>${messages.length === 0 ? 'Nothing has been sent yet.' : `${messages.length} messages. Nothing here left this machine.`}</p>
<table><thead><tr><th>Received</th><th>To</th><th>Subject</th></tr></thead><tbody>${rows}</tbody></table>${shown}</body></html>`
}

import type { LineItem, Session } from './pay-store'

const escape = (text: string) => text.replace(/[&<>"']/g, character => `&#${character.charCodeAt(0)};`)
const money = (minor: number, currency: string) => new Intl.NumberFormat('en-GB', { style: 'currency', currency: currency.toUpperCase() }).format(minor / 100)

const style = `:root{color-scheme:light dark;--ground:#e4e6e5;--paper:#fbfbf8;--ink:#1c2227;--soft:#4b555c;--line:#b9bfc1;--layout:#1f3f8a;--on:#fff;--warn:#8a2f1f}
@media(prefers-color-scheme:dark){:root{--ground:#14181b;--paper:#1e2428;--ink:#e9ecec;--soft:#aab3b8;--line:#3f484d;--layout:#8fb0ff;--on:#10151c;--warn:#ffb09e}}
*{box-sizing:border-box}body{margin:0;background:var(--ground);color:var(--ink);font:16px/1.5 system-ui,sans-serif}
header{background:var(--layout);color:var(--on);padding:.7rem 1rem;font-weight:640}
main{max-width:30rem;margin:1.5rem auto;background:var(--paper);border:1px solid var(--line);border-radius:3px;padding:1.25rem}
h1{font-size:1.3rem;margin:0 0 .25rem}.sum{font:500 2rem/1.2 ui-monospace,monospace;margin:.5rem 0}
p{margin:.5rem 0}.soft{color:var(--soft);font-size:.9rem}[role=alert]{border-left:4px solid var(--warn);padding:.4rem .75rem;font-weight:600}
form{margin:.6rem 0}button,.back{display:block;width:100%;min-height:2.75rem;padding:.6rem 1rem;border:1px solid var(--line);border-radius:3px;background:transparent;color:var(--ink);font:inherit;text-align:center;text-decoration:none;cursor:pointer}
button.go{background:var(--layout);border-color:var(--layout);color:var(--on);font-weight:640}:focus-visible{outline:3px solid var(--layout);outline-offset:2px}
hr{border:0;border-top:1px solid var(--line);margin:1rem 0}`

const page = (title: string, body: string) => `<!doctype html><html lang="en"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width"><title>${escape(title)}</title><style>${style}</style></head>
<body><header>Card payments on this machine</header><main>${body}</main></body></html>`

/** The page a payer is sent to: no card is asked for, each button is what a card would do. */
export function hostedPage(session: Session, items: readonly LineItem[], said: string | null): string {
  const what = items.map(item => escape(item.description)).join('<br>')
  const sum = money(session.amount_total, session.currency)
  const back = session.cancel_url === null ? '' : `<a class="back" href="${escape(session.cancel_url)}">Back without paying</a>`
  if (session.status === 'complete') return page('Paid', `<h1>This is paid</h1><p class="sum">${sum}</p><p>${what}</p>`)
  if (session.status === 'expired') return page('Expired', `<h1>This payment page has expired</h1><p>Nothing was taken. Go back and begin again.</p>${back}`)
  const button = (action: string, words: string, more = '') => `<form method="post" action="/pay/${session.id}/${action}"><button${more}>${words}</button></form>`
  return page('Pay', `<h1>${what}</h1><p class="sum">${sum}</p>${said === null ? '' : `<p role="alert">${escape(said)}</p>`}
${session.customer_email === null ? '' : `<p class="soft">For ${escape(session.customer_email)}</p>`}
${button('pay', `Pay ${sum}`, ' class="go"')}<hr>
<p class="soft">A stand-in for the card processor: no card is asked for and nothing is taken. What a card may also do:</p>
${button('declined', 'Card is declined')}${button('insufficient', 'Not enough money on the card')}${button('expire', 'The page expires')}<hr>${back}`)
}

export const noSuchPage = () => page('Not here', '<h1>There is no such payment page</h1>')

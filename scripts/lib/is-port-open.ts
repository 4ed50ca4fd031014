import { connect } from 'node:net'

/** Whether something on this machine answers on that TCP port. */
export function isPortOpen(port: number, host = '127.0.0.1'): Promise<boolean> {
  return new Promise((resolve) => {
    const socket = connect({ port, host, timeout: 1000 })
    const answer = (open: boolean) => {
      socket.destroy()
      resolve(open)
    }
    socket.once('connect', () => answer(true))
    socket.once('timeout', () => answer(false))
    socket.once('error', () => answer(false))
  })
}

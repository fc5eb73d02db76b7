import { createServer } from 'node:net'
import type { AddressInfo } from 'node:net'
import { PlainFailure } from './plainFailure.mjs'

const listenOnce = (port: number, host: string): Promise<number> =>
  new Promise((resolve, reject) => {
    const probe = createServer()
    probe.once('error', reject)
    probe.listen(port, host, () => {
      const address = probe.address() as AddressInfo
      probe.close(() => resolve(address.port))
    })
  })

/** A port of loopback that nobody listens on now. */
export const freePort = (): Promise<number> => listenOnce(0, '127.0.0.1')

/** Says which setting to change when somebody else has the port. */
export async function requirePort(port: number, host: string, setting: string): Promise<void> {
  try {
    await listenOnce(port, host)
  } catch (error) {
    const code = error instanceof Error && 'code' in error ? error.code : undefined
    if (code === 'EADDRINUSE') {
      throw new PlainFailure(
        `Port ${port} on ${host} is busy: another program listens there. Set ${setting} to a free one.`,
      )
    }
    if (code === 'EACCES')
      throw new PlainFailure(`A right is missing: port ${port} is kept for root. Set ${setting} to 1024 or more.`)
    if (code === 'EADDRNOTAVAIL') throw new PlainFailure(`This machine has no address ${host}. Set HOST to 127.0.0.1.`)
    throw error
  }
}

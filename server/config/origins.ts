/** Which pages may change something or open a live socket: our own. */
import type { Environment } from './environment.ts'
import { isLoopback } from './environment.ts'

const loopbackNames = ['127.0.0.1', 'localhost', '[::1]']

/** On loopback the same program has several names. */
export function ownOrigins({ publicUrl }: Environment): string[] {
  const { origin, protocol, hostname, port } = new URL(publicUrl)
  if (!isLoopback(hostname)) return [origin]
  return loopbackNames.map((name) => `${protocol}//${name}${port ? `:${port}` : ''}`)
}

/** A request that names no origin does not come from a page of another site: browsers name it on every change. */
export const isOwnOrigin = (environment: Environment, origin: string | undefined): boolean =>
  origin === undefined || ownOrigins(environment).includes(origin)

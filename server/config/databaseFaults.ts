/** Tells "the database is not there" from "the statement is wrong". */
import {
  ConnectionAcquireTimeoutError,
  ConnectionError,
  DatabaseError,
  HostNotFoundError,
  HostNotReachableError,
} from 'sequelize'

/** Server gone, shutting down, connection lost or timed out, too many connections: of MariaDB and of its connector. */
const lostCodes = new Set([
  'ER_SERVER_SHUTDOWN', 'ER_CONNECTION_KILLED', 'ER_CON_COUNT_ERROR', 'ER_DISK_FULL', 'ER_RECORD_FILE_FULL',
  'ER_SOCKET', 'ER_SOCKET_UNEXPECTED_CLOSE', 'ER_SOCKET_TIMEOUT', 'ER_CMD_CONNECTION_CLOSED',
  'ER_CMD_NOT_EXECUTED_DESTROYED', 'ER_CONNECTION_ALREADY_CLOSED', 'ER_CONNECTION_TIMEOUT', 'ER_PING_TIMEOUT',
  'ER_GET_CONNECTION_TIMEOUT', 'ER_SETTING_SESSION_ERROR', 'ER_INITIAL_SQL_ERROR', 'ER_INITIAL_TIMEOUT_ERROR',
  'ECONNRESET', 'ECONNREFUSED', 'EPIPE', 'ETIMEDOUT',
]) // prettier-ignore

const codeOf = (error: unknown): string =>
  error instanceof Error && 'code' in error && typeof error.code === 'string' ? error.code : ''

export function isDatabaseUnavailable(error: unknown): boolean {
  if (error instanceof ConnectionError || error instanceof ConnectionAcquireTimeoutError) return true
  if (error instanceof HostNotFoundError || error instanceof HostNotReachableError) return true
  if (error instanceof DatabaseError) return lostCodes.has(codeOf(error.original))
  return lostCodes.has(codeOf(error))
}

/** Deadlock or lock wait too long: the same transaction may be tried again. */
export const isRepeatable = (error: unknown): boolean =>
  error instanceof DatabaseError && ['ER_LOCK_DEADLOCK', 'ER_LOCK_WAIT_TIMEOUT'].includes(codeOf(error.original))

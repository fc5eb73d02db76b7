/** One server a database: the lock hangs on a connection of its own and goes with it. */
import { createConnection } from 'mariadb'
import type { Connection } from 'mariadb'
import type { Logger } from './logger.ts'

export interface DatabaseLock {
  release(): Promise<void>
}

const waitSeconds = 1
const lookMilliseconds = 1_000
const looksAPing = 10

/** Null: another server holds the database. Throws where the database cannot be reached. */
async function take(url: string): Promise<Connection | null> {
  const { hostname, port, username, password, pathname } = new URL(url)
  const connection = await createConnection({
    host: hostname.replace(/^\[|\]$/g, ''),
    port: Number(port || 3306),
    user: decodeURIComponent(username),
    password: decodeURIComponent(password),
    database: decodeURIComponent(pathname.slice(1)),
    connectTimeout: 3_000,
  })
  connection.on('error', () => undefined)
  try {
    await connection.query('SET SESSION wait_timeout = 60')
    const rows: { held: number | bigint | null }[] = await connection.query(
      "SELECT GET_LOCK(CONCAT('offing:', MD5(DATABASE())), ?) AS held",
      [waitSeconds],
    )
    if (Number(rows[0]?.held) === 1) return connection
  } catch (error) {
    connection.destroy()
    throw error
  }
  await connection.end()
  return null
}

/**
 * Null: another server holds it. Afterwards the lock is kept through restarts of the database; `onTaken` is called
 * when another server was quicker then, and this one must stop.
 */
export async function lockDatabase(url: string, logger: Logger, onTaken: () => void): Promise<DatabaseLock | null> {
  const first = await take(url)
  if (!first) return null
  let connection: Connection = first
  let isBusy = false
  let looks = 0

  /** Looks at the connection every second and asks the server every ten, which also keeps it from standing idle. */
  async function look(): Promise<void> {
    looks += 1
    if (connection.isValid() && looks % looksAPing !== 0) return
    if (await answers(connection)) return
    connection.destroy()
    const next = await take(url)
    if (!next) return onTaken()
    connection = next
    logger.info('the database is back and held again')
  }
  const timer = setInterval(() => {
    if (isBusy) return
    isBusy = true
    look()
      .catch((error: unknown) => logger.warn({ error }, 'the database is not held'))
      .finally(() => (isBusy = false))
  }, lookMilliseconds)
  timer.unref()
  return {
    async release() {
      clearInterval(timer)
      await connection.end().catch(() => undefined)
    },
  }
}

const answers = (connection: Connection): Promise<boolean> =>
  connection.isValid()
    ? connection.ping().then(
        () => true,
        () => false,
      )
    : Promise.resolve(false)

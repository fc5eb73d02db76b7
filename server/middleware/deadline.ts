/** No request waits for ever: a database that stalls gives 503 instead of a pile of open requests. */
import { databaseUnavailable } from '../services/problems.ts'

export async function withDeadline<Result>(work: Promise<Result>, milliseconds: number): Promise<Result> {
  let timer: NodeJS.Timeout | undefined
  const deadline = new Promise<never>((_resolve, reject) => {
    timer = setTimeout(() => reject(databaseUnavailable()), milliseconds)
  })
  try {
    return await Promise.race([work, deadline])
  } finally {
    clearTimeout(timer)
  }
}

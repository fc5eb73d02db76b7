import { listenToAnswers } from '../api/request.ts'
import { useServerClock } from '../stores/serverClock.ts'
import { useSession } from '../stores/session.ts'

/** Every answer of the server tells its time, and whether the session still holds. */
export function hearAnswers(): void {
  const clock = useServerClock()
  const session = useSession()
  listenToAnswers({ answered: (ms) => clock.answered(ms), unauthorized: () => session.end() })
  clock.start()
}

/** Kills at moments that chance gives, by seed. */
import { until } from '../support/until.ts'
import { chance } from './chance.ts'
import type { Scene, Victim } from './scene.ts'

export interface Kill {
  victim: Victim
  /** Milliseconds after the stream is under way. */
  after: number
}

const pause = (milliseconds: number): Promise<void> => new Promise((resolve) => setTimeout(resolve, milliseconds))

/** Every victim equally often, in an order and at moments of chance. */
export function planKills(seed: number, rounds: number, longestPause: number): Kill[] {
  const roll = chance(seed)
  return Array.from({ length: rounds }, () => {
    const victims: Victim[] = ['server', 'database', 'simulator']
    const order: Victim[] = []
    while (victims.length > 0) order.push(...victims.splice(Math.floor(roll() * victims.length), 1))
    return order.map((victim) => ({ victim, after: Math.round(200 + roll() * (longestPause - 200)) }))
  }).flat()
}

/** So many more frames must have been acknowledged before the next kill: it has to hit work, not recovery alone. */
const framesBetween = 8
const patience = 45_000

/** What is killed is started again at once, as a service manager would. */
export async function carryOut(
  kills: Kill[],
  { victims, recorder }: Scene,
  say: (line: string) => void,
): Promise<void> {
  const { history } = recorder
  for (const { victim, after } of kills) {
    const before = history.acknowledged
    await until('the stream is under way again', () => history.acknowledged >= before + framesBetween, patience)
    await pause(after)
    say(`kill -9 of the ${victim}, ${history.acknowledged} of ${history.sent} frames acknowledged`)
    await victims[victim].kill()
    await victims[victim].start()
  }
}

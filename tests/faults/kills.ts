/** Kills at moments that chance gives, by seed. */
import { chance } from './chance.ts'
import type { Scene, Victim } from './scene.ts'

export interface Kill {
  victim: Victim
  /** Milliseconds after the kill before. */
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
    return order.map((victim) => ({ victim, after: Math.round(500 + roll() * (longestPause - 500)) }))
  }).flat()
}

/** What is killed is started again at once, as a service manager would. */
export async function carryOut(
  kills: Kill[],
  { victims, recorder }: Scene,
  say: (line: string) => void,
): Promise<void> {
  for (const { victim, after } of kills) {
    await pause(after)
    say(`kill -9 of the ${victim}, ${recorder.history.acknowledged} of ${recorder.history.sent} frames acknowledged`)
    await victims[victim].kill()
    await victims[victim].start()
  }
}

/** Who can sign in to the demonstration: the seeder leaves a list for the owner's eyes. */
import { readFile } from 'node:fs/promises'
import { join } from 'node:path'
import { z } from 'zod'

const people = z.array(z.object({ email: z.string(), password: z.string(), role: z.string() }))
export type DemonstrationPerson = z.infer<typeof people>[number]

export const peopleFile = 'demonstration-passwords.json'
/** Station code to key, as the simulator reads it. */
export const stationKeysFile = 'demonstration-station-keys.json'

export async function readDemonstrationPeople(dataFolder: string): Promise<DemonstrationPerson[]> {
  return people.parse(JSON.parse(await readFile(join(dataFolder, peopleFile), 'utf8')))
}

/** One line a person, in columns. */
export function peopleLines(list: DemonstrationPerson[]): string[] {
  const width = (of: (person: DemonstrationPerson) => string) => Math.max(...list.map((person) => of(person).length))
  const email = width((person) => person.email)
  const password = width((person) => person.password)
  return list.map((person) => `  ${person.email.padEnd(email)}  ${person.password.padEnd(password)}  ${person.role}`)
}

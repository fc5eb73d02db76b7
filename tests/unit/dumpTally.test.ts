import { createHash } from 'node:crypto'
import { Readable } from 'node:stream'
import { expect, test } from 'vitest'
import { createDumpTally, differencesOf } from '../../server/services/backups/dumpTally.ts'

const dump = [
  'CREATE TABLE `empty` (',
  '  `id` int',
  ');',
  'CREATE TABLE `ships` (',
  '  `id` int',
  ');',
  'INSERT INTO `ships` VALUES',
  "(1,'Heron\\n(2,'),",
  "(2,'),(3');",
  'INSERT INTO `ships` VALUES',
  "(4,'Tern');",
  '',
].join('\n')
const sha = (text: string): string => createHash('sha256').update(text).digest('hex')

async function tallyOf(pieces: string[]) {
  const { through, tally } = createDumpTally()
  for await (const _chunk of Readable.from(pieces.map((text) => Buffer.from(text))).pipe(through)) continue
  return tally()
}

test('rows of a dump are counted and digested by table, however it comes in pieces and statements', async () => {
  const wanted = {
    empty: { rows: 0, sha256: sha('') },
    ships: { rows: 3, sha256: sha("(1,'Heron\\n(2,')(2,'),(3')(4,'Tern')") },
  }
  expect(await tallyOf([dump])).toEqual(wanted)
  expect(await tallyOf([...dump])).toEqual(wanted)
  const asOne = dump.replace("');\nINSERT INTO `ships` VALUES\n", "'),\n")
  expect(await tallyOf([asOne])).toEqual(wanted)
})

test('what differs between a backup and a restore is said table by table', async () => {
  const whole = await tallyOf([dump])
  expect(differencesOf(whole, whole)).toEqual([])
  expect(differencesOf(whole, await tallyOf([dump.replace('Tern', 'Teal')]))).toEqual([
    'ships: 3 rows, but with another content',
  ])
  expect(differencesOf(whole, { ships: { rows: 2, sha256: '' } })).toEqual([
    'empty: is missing, 0 rows wanted',
    'ships: 2 rows, 3 wanted',
  ])
  expect(differencesOf({}, { more: { rows: 1, sha256: '' } })).toEqual(['more: is not in the backup'])
})

import { expect, test } from 'vitest'
import { checkDesign, unresolvedFindings } from '../../../shared/arrayDesign/checkDesign.ts'
import { compareDeployments } from '../../../shared/arrayDesign/compareDeployments.ts'
import { designCheck } from '../../../shared/schemas/stationSetUpDesign.ts'
import { draftOf, placed, questionOf } from './arrays.ts'

const five: [number, number][] = [[0, 0], [14, 3], [4, 15], [-12, 6], [-5, -13]] // prettier-ignore
const about = (array: ReturnType<typeof draftOf>, check: string) =>
  checkDesign(array, questionOf()).findings.find((finding) => finding.check === check)

test('an array of five spread over 30 m has nothing to resolve, and the check fits its shape', () => {
  const check = checkDesign(draftOf(five), questionOf({ periodFrom: 5 }))
  expect(unresolvedFindings(check.findings)).toEqual([])
  expect(designCheck.parse(check)).toEqual(check)
  expect(check.curves.map(({ without }) => without)).toEqual([null, 'A', 'B', 'C', 'D', 'E'])
})

test('two sensors give no direction, and say so without figures', () => {
  const check = checkDesign(draftOf([[0, 0], [10, 0]]), questionOf()) // prettier-ignore
  expect(check.findings.filter(({ quality }) => quality === 'fail').map(({ check: name }) => name)).toEqual(['count', 'falsePeak', 'heading', 'speed']) // prettier-ignore
  expect(check.curves[0]?.headingSd.every((value) => value === null)).toBe(true)
  expect(check.curves[0]?.reason).toBe('2 sensors are left; a direction needs three')
})

test('no sensor at all is an answer too', () => {
  expect(checkDesign(draftOf([]), questionOf()).findings[0]).toMatchObject({ check: 'count', quality: 'fail' })
})

test('sensors on one line fail', () => {
  expect(about(draftOf([[0, 0], [9, 0.1], [21, 0], [30, -0.1]]), 'line')).toMatchObject({ quality: 'fail' }) // prettier-ignore
})

test('three of four on a line are suspect and named', () => {
  expect(about(draftOf([[0, 0], [10, 0], [20, 0.2], [8, 12]]), 'line')).toMatchObject({ quality: 'suspect', sentence: 'A, B, C stand on one line' }) // prettier-ignore
})

test('three sensors lose their direction with any of them', () => {
  expect(about(draftOf([[0, 0], [10, 0], [0, 10]]), 'loss')).toMatchObject({ quality: 'suspect', sentence: 'Without any one of them no direction is left' }) // prettier-ignore
})

test('a wide square mistakes short waves and says which for which', () => {
  const finding = about(draftOf([[0, 0], [60, 0], [60, 60], [0, 60]]), 'falsePeak') // prettier-ignore
  expect(finding?.quality).toBe('fail')
  expect(finding?.sentence).toMatch(/^At a single period waves of \d+\.\d s from \d{3}° T can be read as from \d{3}° T/)
})

test('a pressure sensor above the water fails', () => {
  const array = draftOf(five, 0.4)
  expect(about({ ...array, levelOfBed: -0.4 }, 'aboveWater')).toMatchObject({ quality: 'good' })
  expect(checkDesign(array, questionOf({ waterDepth: 0.4 })).findings).toContainEqual(expect.objectContaining({ check: 'aboveWater', quality: 'fail' })) // prettier-ignore
})

test('a sensor that stands elsewhere than in the deployment before is named with its distance', () => {
  const array = draftOf(five)
  const earlier = { number: 2, sensors: [placed('A', 0, 0), placed('B', 14, 3.31), { ...placed('C', 40, 40), serial: 'other' }] } // prettier-ignore
  const moved = checkDesign({ ...array, earlier }, questionOf()).findings.filter(({ check }) => check.startsWith('moved')) // prettier-ignore
  expect(moved).toEqual([
    expect.objectContaining({ check: 'moved:B', quality: 'suspect', sentence: 'B moved 0.31 m since deployment 2' }),
  ])
})

test('two deployments are compared sensor by sensor', () => {
  const before = { id: 1, waterDepth: 8, levelOfBed: -8, sensors: [placed('A', 0, 0), placed('B', 10, 0), placed('C', 0, 10)] } // prettier-ignore
  const after = {
    id: 2,
    waterDepth: 8.2,
    levelOfBed: -8.2,
    sensors: [placed('A', 0, 0), { ...placed('B', 10, 3), clockSd: 0.01 }, { ...placed('D', 5, 5), serial: 'new' }],
  }
  const { sensors, ...levels } = compareDeployments(before, after)
  expect(levels.waterDepthChange).toBeCloseTo(0.2, 9)
  expect(sensors.map(({ letter, change, movedBy, movedToward }) => [letter, change, movedBy, movedToward])).toEqual([
    ['A', 'same', 0, null],
    ['B', 'moved', 3, 0],
    ['D', 'added', null, null],
    ['C', 'removed', null, null],
  ])
  expect(sensors[1]?.others).toEqual(['one sigma of the clock, s: 0.002 to 0.01'])
})

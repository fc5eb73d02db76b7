import { describe, expect, it } from 'vitest'
import { appendTraces } from '../../../src/stores/traceBuffer.ts'

const start = Date.parse('2026-11-12T14:32:00.000Z')
const chunk = (secondsIn: number, values: (number | null)[][], sensors = ['OL-1', 'OL-2']) => ({
  stationId: 1,
  startsAt: new Date(start + secondsIn * 1000).toISOString(),
  interval: 0.5,
  sensors,
  values,
})

describe('trace buffer', () => {
  it('joins chunks that follow each other', () => {
    const first = appendTraces(null, chunk(0, [[1, 2], [5, 6]])) // prettier-ignore
    const both = appendTraces(first, chunk(1, [[3, 4], [7, 8]])) // prettier-ignore
    expect(both.startsAtMs).toBe(start)
    expect(both.values).toEqual([[1, 2, 3, 4], [5, 6, 7, 8]]) // prettier-ignore
  })

  it('leaves what lies between two chunks missing', () => {
    const first = appendTraces(null, chunk(0, [[1], [2]]))
    const both = appendTraces(first, chunk(1.5, [[3], [4]]))
    expect(both.values).toEqual([[1, null, null, 3], [2, null, null, 4]]) // prettier-ignore
  })

  it('takes a late chunk in before what it has', () => {
    const first = appendTraces(null, chunk(1, [[3], [4]]))
    const both = appendTraces(first, chunk(0.5, [[1], [2]]))
    expect(both.startsAtMs).toBe(start + 500)
    expect(both.values).toEqual([[1, 3], [2, 4]]) // prettier-ignore
  })

  it('never puts a missing value over a measured one', () => {
    const first = appendTraces(null, chunk(0, [[1, 2], [3, 4]])) // prettier-ignore
    const both = appendTraces(first, chunk(0, [[null, 9], [null, null]])) // prettier-ignore
    expect(both.values).toEqual([[1, 9], [3, 4]]) // prettier-ignore
  })

  it('lets fall what is older than its span', () => {
    let buffer = appendTraces(null, chunk(0, [[0], [0]]), 2)
    for (let n = 1; n < 10; n += 1) buffer = appendTraces(buffer, chunk(n / 2, [[n], [n]]), 2)
    expect(buffer.values[0]).toEqual([6, 7, 8, 9])
    expect(buffer.startsAtMs).toBe(start + 3_000)
  })

  it('begins anew when the array or its rate has changed', () => {
    const first = appendTraces(null, chunk(0, [[1], [2]]))
    const other = appendTraces(first, chunk(1, [[3]], ['OL-9']))
    expect(other.sensors).toEqual(['OL-9'])
    expect(other.values).toEqual([[3]])
  })
})

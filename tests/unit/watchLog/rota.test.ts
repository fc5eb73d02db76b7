import { describe, expect, it } from 'vitest'
import { currentRotaWatch, nextRotaWatch } from '../../../shared/watchLog/rota.ts'

const rota = [
  { name: 'A', from: '06:00', to: '12:00' },
  { name: 'B', from: '12:00', to: '18:00' },
  { name: 'C', from: '18:00', to: '06:00' },
]
const at = (iso: string): number => Date.parse(iso)

describe('the rota, kept by the port’s clock', () => {
  it('says which watch it is and which comes next, over midnight too', () => {
    // One hour ahead of UTC in winter.
    expect(currentRotaWatch(rota, 'Europe/Paris', at('2026-11-12T14:32:00Z'))?.watch.name).toBe('B')
    expect(nextRotaWatch(rota, 'Europe/Paris', at('2026-11-12T14:32:00Z'))).toEqual({
      name: 'C',
      startsAt: at('2026-11-12T17:00:00Z'),
    })
    expect(currentRotaWatch(rota, 'Europe/Paris', at('2026-11-13T02:00:00Z'))?.watch.name).toBe('C')
    expect(nextRotaWatch(rota, 'Europe/Paris', at('2026-11-13T02:00:00Z'))).toEqual({
      name: 'A',
      startsAt: at('2026-11-13T05:00:00Z'),
    })
  })

  it('begins at its hour on the day the clocks are changed', () => {
    // 25 October 2026: 03:00 summer time becomes 02:00, so 06:00 local is 05:00 UTC instead of 04:00.
    expect(nextRotaWatch(rota, 'Europe/Paris', at('2026-10-24T20:00:00Z'))?.startsAt).toBe(at('2026-10-25T05:00:00Z'))
  })

  it('of an office without one says nothing', () => {
    expect(currentRotaWatch([], 'UTC', 0)).toBeNull()
    expect(nextRotaWatch([], 'UTC', 0)).toBeNull()
  })
})

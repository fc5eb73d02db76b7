import { describe, expect, it } from 'vitest'
import { useUndo } from '../../../src/composables/useUndo.ts'

describe('undo', () => {
  it('takes a whole gesture back at once, and gives it again', () => {
    const { now, change, undo, redo, mayUndo, mayRedo } = useUndo(0)
    change(1)
    change(2, 'drag 1')
    change(3, 'drag 1')
    change(4, 'drag 2')
    undo()
    expect(now.value).toBe(3)
    undo()
    expect(now.value).toBe(1)
    redo()
    expect(now.value).toBe(3)
    expect([mayUndo.value, mayRedo.value]).toEqual([true, true])
  })

  it('forgets what was undone when something else is done, and everything at a new beginning', () => {
    const { now, change, undo, redo, begin, mayUndo, mayRedo } = useUndo(0)
    change(1)
    undo()
    change(5)
    redo()
    expect(now.value).toBe(5)
    begin(9)
    expect([now.value, mayUndo.value, mayRedo.value]).toEqual([9, false, false])
  })
})

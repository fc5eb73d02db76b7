/** What the DOM of the tests lacks, and Quasar for every component that is mounted. */
import { config } from '@vue/test-utils'
import { Quasar } from 'quasar'
import { vi } from 'vitest'

class StillObserver {
  observe(): void {}
  unobserve(): void {}
  disconnect(): void {}
  takeRecords(): [] {
    return []
  }
}

vi.stubGlobal('ResizeObserver', StillObserver)
vi.stubGlobal('IntersectionObserver', StillObserver)
if (!('orientation' in window.screen))
  Object.assign(window.screen, { orientation: { type: 'landscape-primary', angle: 0 } })

config.global.plugins = [[Quasar, {}]]

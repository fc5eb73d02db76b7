/** Alerts as the watch sees them. REST answers and live events pass through one function, `apply`. */
import { defineStore } from 'pinia'
import { computed, ref, shallowReactive, shallowRef } from 'vue'
import { alertView } from '../../shared/schemas/alert.ts'
import type { AlertBoard, AlertDetail, AlertHistory, AlertView, Shelving } from '../../shared/schemas/alert.ts'
import * as api from '../api/alerts.ts'
import { compareRows, isActive, isNewerAlert, rowOfAlert, rowOfLimit, tally } from './alertOrder.ts'
import { useLive } from './live.ts'
import { useSession } from './session.ts'

export type AlertNews =
  | { kind: 'board'; body: AlertBoard }
  | { kind: 'alert'; body: AlertView }
  | { kind: 'detail'; body: AlertDetail }
  | { kind: 'history'; id: number; body: AlertHistory }

/** What only the board says (judged, causes of a flood) is read again so long after an alert has changed. */
const boardAgainMs = 1_000
/** Limits become judged or not judged without any alert. */
const boardEachMs = 30_000

export const useAlerts = defineStore('alerts', () => {
  const live = useLive()
  const session = useSession()
  const held = shallowReactive(new Map<number, AlertView>())
  const details = shallowReactive(new Map<number, AlertDetail>())
  const histories = shallowReactive(new Map<number, AlertHistory>())
  const board = shallowRef<AlertBoard | null>(null)
  /** The newest attempt to read the board had no answer. */
  const isUnread = ref(false)

  const loaded = computed(() => board.value !== null)
  const open = computed(() => [...held.values()].filter((alert) => alert.closedAt === null && alert.state !== 'normal'))
  const rows = computed(() => {
    const withAlert = new Set(open.value.map((alert) => alert.limitId))
    const aside = (board.value?.limits ?? []).filter((limit) => !withAlert.has(limit.id))
    return [...open.value.map(rowOfAlert), ...aside.map(rowOfLimit)].sort(compareRows)
  })
  const counts = computed(() => tally(rows.value))
  const activeRows = computed(() => rows.value.filter((row) => isActive(row.state)))
  /** A limit on waves is exceeded, acknowledged, shelved or put aside; exercises are not the sea. */
  const isWaveExceeded = computed(() =>
    rows.value.some(({ alert, limit }) =>
      alert
        ? alert.limitClass === 'wave' && !alert.isExercise && alert.clearedAt === null
        : limit?.limitClass === 'wave' && limit.isActive,
    ),
  )
  const judged = computed(() => board.value?.judged ?? 0)
  const notJudged = computed(() => board.value?.notJudged ?? [])
  const flood = computed(() => board.value?.flood ?? null)
  const pending = computed(() => board.value?.pending ?? [])
  const messagesNotOut = computed(() => board.value?.messagesNotOut ?? { count: 0, since: null })

  const byId = (id: number): AlertView | undefined => held.get(id)
  /** Everything about an alert that was opened; null before it came. */
  const detail = (id: number): AlertDetail | null => details.get(id) ?? null
  const history = (id: number): AlertHistory | null => histories.get(id) ?? null

  function apply(news: AlertNews): void {
    switch (news.kind) {
      case 'board': {
        const listed = new Set(news.body.alerts.map((alert) => alert.id))
        // One that the board no longer lists is over, unless it came after the board was written.
        for (const alert of open.value) {
          const isOlder = Date.parse(alert.raisedAt) <= Date.parse(news.body.serverTime)
          if (!listed.has(alert.id) && isOlder) held.delete(alert.id)
        }
        board.value = news.body
        for (const alert of news.body.alerts) apply({ kind: 'alert', body: alert })
        return
      }
      case 'alert':
        if (isNewerAlert(news.body, held.get(news.body.id))) held.set(news.body.id, news.body)
        return
      case 'detail': {
        const { limit: _, timeline: __, told: ___, nextStep: ____, caution: _____, ...view } = news.body
        details.set(news.body.id, news.body)
        return apply({ kind: 'alert', body: view })
      }
      case 'history':
        histories.set(news.id, news.body)
    }
  }

  async function readBoard(): Promise<void> {
    try {
      apply({ kind: 'board', body: await api.readBoard() })
      isUnread.value = false
    } catch (error) {
      isUnread.value = true
      throw error
    }
  }

  let soon: ReturnType<typeof setTimeout> | undefined
  let regular: ReturnType<typeof setInterval> | undefined
  const readAgain = (): void => void readBoard().catch(() => undefined)

  /** Many alerts at once are one reading. */
  function readBoardSoon(): void {
    soon ??= setTimeout(() => {
      soon = undefined
      readAgain()
    }, boardAgainMs)
  }

  const opened = new Set<number>()
  async function readDetail(id: number): Promise<void> {
    apply({ kind: 'detail', body: await api.readAlert(id) })
  }
  async function readHistory(id: number): Promise<void> {
    apply({ kind: 'history', id, body: await api.readHistory(id) })
  }

  let leaveRooms: (() => void) | null = null

  /** For as long as somebody is signed in. */
  function watchAll(): void {
    if (leaveRooms) return
    const leaveAlerts = live.join('alerts', {
      async hydrate() {
        await readBoard()
        await Promise.all([...opened].map(readDetail))
      },
      apply(event) {
        const parsed = alertView.safeParse(event.body)
        if (event.kind !== 'alert' || !parsed.success) return
        apply({ kind: 'alert', body: parsed.data })
        if (opened.has(parsed.data.id)) void readDetail(parsed.data.id).catch(() => undefined)
        readBoardSoon()
      },
    })
    regular = setInterval(readAgain, boardEachMs)
    leaveRooms = () => {
      clearInterval(regular)
      clearTimeout(soon)
      soon = undefined
      leaveAlerts()
    }
  }
  function leave(): void {
    leaveRooms?.()
    leaveRooms = null
  }

  /** Everything of one alert, kept fresh until the answer is called. */
  async function openAlert(id: number): Promise<void> {
    opened.add(id)
    await Promise.all([readDetail(id), readHistory(id)])
  }
  const closeAlert = (id: number): void => void opened.delete(id)

  /** By id: whatever stands at that place of the screen now. False: somebody else was first. */
  async function acknowledge(id: number, note: string | null): Promise<boolean> {
    const { isFirst, alert } = await api.acknowledge(id, note)
    changed(alert)
    return isFirst
  }
  function changed(alert: AlertView): void {
    apply({ kind: 'alert', body: alert })
    if (opened.has(alert.id)) void readDetail(alert.id).catch(() => undefined)
    readBoardSoon()
  }

  async function shelve(alertId: number, shelving: Shelving): Promise<void> {
    changed(await api.shelve(alertId, shelving))
  }
  /** An act on the limit behind alerts: what follows from it is read again. */
  const onLimit =
    <Order>(act: (limitId: number, order: Order) => Promise<unknown>) =>
    async (limitId: number, order: Order): Promise<void> => {
      await act(limitId, order)
      await Promise.all([readBoard(), ...[...opened].map(readDetail)]).catch(() => undefined)
    }
  async function beginDrill(order: Parameters<typeof api.beginDrill>[0]): Promise<number> {
    const alert = await api.beginDrill(order)
    changed(alert)
    return alert.id
  }
  const endDrill = async (alertId: number): Promise<void> => changed(await api.endDrill(alertId))

  const mayAcknowledge = computed(
    () => session.allows('alerts.acknowledge') && !session.readOnly && session.state === 'in' && !live.contactLost,
  )
  const mayShelve = computed(
    () => session.allows('alerts.shelve') && !session.readOnly && session.state === 'in' && !live.contactLost,
  )

  return {
    ...{
      loaded,
      isUnread,
      rows,
      activeRows,
      counts,
      isWaveExceeded,
      judged,
      notJudged,
      pending,
      flood,
      messagesNotOut,
    },
    ...{ byId, detail, history, apply, watchAll, leave, openAlert, closeAlert, readPast: api.readPast },
    ...{ acknowledge, shelve, beginDrill, endDrill, mayAcknowledge, mayShelve },
    ...{ unshelve: onLimit(api.unshelve), reset: onLimit(api.reset), takeOut: onLimit(api.takeOut) },
    ...{ putBack: onLimit(api.putBack), readPerformance: api.readPerformance },
  }
})

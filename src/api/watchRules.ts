import { dailyEmailView, watchRulesView } from '../../shared/schemas/watchRules.ts'
import type { DailyEmail, DailyEmailView, WatchRules, WatchRulesView } from '../../shared/schemas/watchRules.ts'
import { request } from './request.ts'

export const readDailyEmail = (): Promise<DailyEmailView> => request('GET', '/api/dailyEmail', dailyEmailView)

export const changeDailyEmail = (version: number, content: DailyEmail, reason: string): Promise<DailyEmailView> =>
  request('PUT', '/api/dailyEmail', dailyEmailView, { content, reason }, version)

export const readWatchRules = (): Promise<WatchRulesView> => request('GET', '/api/watchRules', watchRulesView)

export const changeWatchRules = (version: number, content: WatchRules, reason: string): Promise<WatchRulesView> =>
  request('PUT', '/api/watchRules', watchRulesView, { content, reason }, version)

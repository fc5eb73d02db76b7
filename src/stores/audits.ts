/** The audit as an administrator looks at it. */
import { defineStore } from 'pinia'
import { computed, ref, shallowRef } from 'vue'
import type { AuditChoices, AuditVerification, AuditView } from '../../shared/schemas/audit.ts'
import * as api from '../api/office.ts'
import type { AuditQuery } from '../api/office.ts'

export type { AuditQuery } from '../api/office.ts'

export const useAudits = defineStore('audits', () => {
  const rows = shallowRef<AuditView[]>([])
  const next = ref<number | null>(null)
  const total = ref(0)
  const loaded = ref(false)
  const choices = shallowRef<AuditChoices>({ people: [], entities: [], actions: [] })
  const verification = shallowRef<AuditVerification | null>(null)
  const query = ref<AuditQuery>({})
  const filePath = computed(() => api.auditFilePath(query.value))

  async function read(wanted: AuditQuery): Promise<void> {
    query.value = wanted
    const page = await api.readAudits(wanted, null)
    rows.value = page.audits
    next.value = page.next
    total.value = page.total
    loaded.value = true
  }
  async function readMore(): Promise<void> {
    const page = await api.readAudits(query.value, next.value)
    rows.value = [...rows.value, ...page.audits]
    next.value = page.next
  }
  async function readAround(): Promise<void> {
    ;[choices.value, verification.value] = await Promise.all([api.readAuditChoices(), api.readVerification()])
  }
  async function verify(): Promise<void> {
    verification.value = await api.verifyAudit()
  }

  return { rows, next, total, loaded, choices, verification, filePath, read, readMore, readAround, verify }
})

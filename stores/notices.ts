import { defineStore } from 'pinia'

export interface Notice { id: number, tone: 'done' | 'problem' | 'info', text: string }

const KEEP = 4
const STAY_MS = 8000

/** Short messages that outlive the page they arose on. Problems stay until they are closed. */
export const useNotices = defineStore('notices', () => {
  const notices = ref<Notice[]>([])
  let last = 0

  function close(id: number) {
    notices.value = notices.value.filter(notice => notice.id !== id)
  }

  function say(text: string, tone: Notice['tone'] = 'done') {
    if (import.meta.server) return
    const id = ++last
    notices.value = [...notices.value.slice(1 - KEEP), { id, tone, text }]
    if (tone !== 'problem') setTimeout(close, STAY_MS, id)
  }

  return { notices, say, close }
})

import { defineStore } from 'pinia'
import { useLocalStorage } from '@vueuse/core'

/** Whether single letters are keys of the page. Off for people whose speech or switches would press them unmeant. */
export const useLetterKeys = defineStore('letter-keys', () => {
  const on = useLocalStorage('ribband-letter-keys', true, { initOnMounted: true })
  return { on }
})

import { defineStore } from 'pinia'
import { reactive, toRefs, watch } from 'vue'
import { z } from 'zod'

export const THEMES = ['auto', 'light', 'dark'] as const
export const DECIMAL_SIGNS = ['.', ','] as const
export const COPY_FORMS = ['plain', 'coded'] as const

const Settings = z.object({
  theme: z.enum(THEMES).catch('auto'),
  /** Between whole and fraction in what is shown; addresses, files and the interface for scripts use the point. */
  decimalSign: z.enum(DECIMAL_SIGNS).catch('.'),
  /** How a value is copied: 4700 or 4k7. */
  copyForm: z.enum(COPY_FORMS).catch('plain'),
  /** Whether single keys such as / and ? act. */
  singleKeys: z.boolean().catch(true),
})
export type Settings = z.output<typeof Settings>

const STORED_AS = 'poleshelf.settings'

/** What a person chose, kept in this browser and followed by its other tabs. */
export const useSettings = defineStore('settings', () => {
  const settings = reactive<Settings>(readStored())

  watch(settings, (now) => {
    showTheme(now.theme)
    try {
      localStorage.setItem(STORED_AS, JSON.stringify(now))
    } catch {
      // Without storage the choice holds until the page is closed.
    }
  })
  window.addEventListener('storage', (event) => {
    if (event.key === STORED_AS) Object.assign(settings, readStored())
  })
  showTheme(settings.theme)

  return toRefs(settings)
})

function readStored(): Settings {
  try {
    return Settings.parse(JSON.parse(localStorage.getItem(STORED_AS) ?? '{}'))
  } catch {
    return Settings.parse({})
  }
}

function showTheme(theme: Settings['theme']): void {
  if (theme === 'auto') delete document.documentElement.dataset.theme
  else document.documentElement.dataset.theme = theme
}

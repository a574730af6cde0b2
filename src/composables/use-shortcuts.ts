import { onScopeDispose } from 'vue'
import { useSettings } from '../stores/settings'
import { isSingleKey, SHORTCUTS, type ShortcutId } from './shortcuts'

type Handler = (event: KeyboardEvent) => void | false

const handlers = new Map<ShortcutId, Handler[]>()

/**
 * Acts on a shortcut of the table while the component lives; the newest handler is asked first. One that
 * returns false leaves the key to the next, and in the end to the page.
 */
export function useShortcut(id: ShortcutId, handler: Handler): void {
  handlers.set(id, [...(handlers.get(id) ?? []), handler])
  onScopeDispose(() =>
    handlers.set(
      id,
      (handlers.get(id) ?? []).filter((one) => one !== handler),
    ),
  )
}

/** Listens for the keys of the table, once for the whole page. */
export function useShortcutKeys(): void {
  const settings = useSettings()
  const listen = (event: KeyboardEvent) => {
    if (event.defaultPrevented || event.isComposing || event.altKey) return
    const pressed = event.ctrlKey || event.metaKey ? `Ctrl+${event.key.toUpperCase()}` : event.key
    const isPlain = !pressed.startsWith('Ctrl+')
    if (isPlain && isInField(event)) return
    if (isPlain && isSingleKey(pressed) && !settings.singleKeys) return
    const shortcut = SHORTCUTS.find(({ keys }) => (keys as readonly string[]).includes(pressed))
    const inTurn = shortcut ? [...(handlers.get(shortcut.id) ?? [])].reverse() : []
    if (inTurn.some((handler) => handler(event) !== false)) event.preventDefault()
  }
  document.addEventListener('keydown', listen)
  onScopeDispose(() => document.removeEventListener('keydown', listen))
}

/** Typing belongs to the field; a box to tick takes no text. */
function isInField(event: KeyboardEvent): boolean {
  const [target] = event.composedPath()
  if (!(target instanceof HTMLElement)) return false
  if (target instanceof HTMLInputElement) return !['checkbox', 'radio', 'button', 'submit'].includes(target.type)
  return target.isContentEditable || target.matches('textarea, select, [role=spinbutton], [role=textbox]')
}

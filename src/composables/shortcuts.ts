export interface Shortcut {
  id: string
  /** As KeyboardEvent.key; with Ctrl before it where the modifier is held. */
  keys: readonly string[]
  does: string
  where: string
}

/** Every key that acts outside a field's own manners: the handlers and the list in the help both read this. */
export const SHORTCUTS = [
  { id: 'search', keys: ['/', 'Ctrl+K'], does: 'Go to the search field', where: 'Everywhere' },
  { id: 'keys', keys: ['?'], does: 'Show this list', where: 'Everywhere' },
  { id: 'row-next', keys: ['ArrowDown'], does: 'Next block', where: 'On the shelf' },
  { id: 'row-previous', keys: ['ArrowUp'], does: 'Block before', where: 'On the shelf' },
  { id: 'save', keys: ['Ctrl+S'], does: 'Save the sizing', where: 'On a block' },
  { id: 'undo', keys: ['Ctrl+Z'], does: 'Take the last change of a value back', where: 'On a block' },
  { id: 'redo', keys: ['Ctrl+Y'], does: 'Make it again', where: 'On a block' },
] as const satisfies readonly Shortcut[]

export type ShortcutId = (typeof SHORTCUTS)[number]['id']

/** What fields do by themselves, for the list. */
export const FIELD_KEYS: readonly Omit<Shortcut, 'id'>[] = [
  { keys: ['Enter'], does: 'Open the block, or take over what is typed', where: 'In lists and fields' },
  { keys: ['ArrowUp', 'ArrowDown'], does: 'Next preferred value up or down', where: 'In a part’s field' },
  { keys: ['PageUp', 'PageDown'], does: 'A decade up or down', where: 'In a part’s field' },
  { keys: ['Escape'], does: 'Take back what is typed; close what is open', where: 'In fields and dialogs' },
]

const SHOWN: Readonly<Record<string, string>> = {
  ArrowUp: '↑',
  ArrowDown: '↓',
  ArrowLeft: '←',
  ArrowRight: '→',
  PageUp: 'Page ↑',
  PageDown: 'Page ↓',
  Escape: 'Esc',
}

/** A key as it stands on the keyboard. */
export const shownKey = (key: string): string => SHOWN[key] ?? key.replace('Ctrl+', 'Ctrl ')

/** Whether a shortcut is a single printing key, which settings can switch off (WCAG 2.2, 2.1.4). */
export const isSingleKey = (key: string): boolean => [...key].length === 1

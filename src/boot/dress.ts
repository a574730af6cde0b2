import { QDialog, QMenu, QTooltip } from 'quasar'

type Defaults = Record<string, unknown>

/** Other defaults for a component's properties: the one place where Quasar's manners are changed. */
function dress(component: unknown, defaults: Defaults): void {
  const { props } = component as { props: Record<string, unknown> }
  for (const [name, value] of Object.entries(defaults)) {
    const type = typeof value === 'boolean' ? Boolean : typeof value === 'number' ? [String, Number] : String
    props[name] = { type, default: value }
  }
}

/** Nothing floats in from anywhere: what opens is there. */
export default () => {
  dress(QDialog, { square: true, transitionDuration: 0 })
  dress(QMenu, { square: true, transitionDuration: 0 })
  dress(QTooltip, { transitionDuration: 0, delay: 400 })
}

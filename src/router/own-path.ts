/** The shelf, where nothing else was asked for. */
export const HOME = '/'

/**
 * A path of our own to go on to after sign-in, or the shelf. Other origins do not get through: neither `//host` nor
 * `/\host`, nor anything that browsers strip before they read an address.
 */
export function ownPath(asked: unknown): string {
  if (typeof asked !== 'string' || asked.length > 2000) return HOME
  // eslint-disable-next-line no-control-regex
  if (!/^\/(?![/\\])/.test(asked) || /[\u0000-\u001f\u007f\\]/.test(asked)) return HOME
  return /^\/sign-in(?:[/?#]|$)/.test(asked) ? HOME : asked
}

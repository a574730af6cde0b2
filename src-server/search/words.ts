/** Words of a text for searching: folded case and accents; a hyphenated word gives its parts and the parts joined. */
export function wordsOf(text: string): string[] {
  return fold(text)
    .split(/[^\p{L}\p{N}-]+/u)
    .flatMap((word) => {
      const parts = word.split('-').filter(Boolean)
      return parts.length > 1 ? [...parts, parts.join('')] : parts
    })
}

/** Lower case without accents: Sallen–Key and sallen-key are one. */
export const fold = (text: string): string =>
  text
    .normalize('NFKD')
    .replace(/\p{M}+/gu, '')
    .replace(/[\u2010-\u2015]/g, '-')
    .toLowerCase()

/** What the trade calls the functions, whatever a block's own aliases say. */
export const TRADE_WORDS: Record<string, string> = {
  'low-pass': 'lpf lp low pass lowpass anti alias antialias high cut',
  'high-pass': 'hpf hp high pass highpass low cut ac coupling',
  'band-pass': 'bpf bp band pass bandpass',
  'band-stop': 'bsf band stop bandstop notch reject',
  'all-pass': 'apf all pass allpass phase shifter',
  shelving: 'shelf tilt',
  gain: 'amplifier buffer',
}

const TOKENS_MAX = 12

/** The words a person typed, as data: letters and digits, the last perhaps unfinished. */
export function searchTokens(typed: string): string[] {
  const words = fold(typed)
    .split(/[^\p{L}\p{N}]+/u)
    .filter(Boolean)
    .map((word) => word.slice(0, 40))
  return [...new Set(words)].slice(0, TOKENS_MAX)
}

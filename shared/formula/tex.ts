import { formatQuantity } from '../quantities/format'
import type { Formula } from './parse'
import type { Tree } from './tree'

const GREEK: Record<string, string> = {
  alpha: 'alpha',
  beta: 'beta',
  gamma: 'gamma',
  delta: 'delta',
  omega: 'omega',
  tau: 'tau',
  phi: 'varphi',
  pi: 'pi',
  α: 'alpha',
  β: 'beta',
  γ: 'gamma',
  δ: 'delta',
  ω: 'omega',
  τ: 'tau',
  φ: 'varphi',
  π: 'pi',
  Ω: 'Omega',
  Δ: 'Delta',
}

/** Binding strength, so that only needed parentheses are set. */
const POWER = { comparison: 1, sum: 2, product: 3, sign: 4, power: 5, atom: 6 }

/**
 * Typesets a formula from the tree that computes.
 * @returns TeX built from letters, digits and commands of this file alone
 */
export const formulaTex = (formula: Formula): string => tex(formula.tree).text

/**
 * A name with its subscript: Rf becomes R_f, f_c, Z_in, C1 likewise.
 * @example nameTex('Rf') // 'R_{\\mathrm{f}}'
 */
export function nameTex(name: string): string {
  const [head, sub] = splitName(name)
  const letter = Object.hasOwn(GREEK, head) ? `\\${GREEK[head]}` : /^.$/u.test(head) ? head : `\\mathrm{${head}}`
  return sub ? `${letter}_{${/^\d+$/.test(sub) ? sub : `\\mathrm{${sub}}`}}` : letter
}

/** The letter and the subscript of a name: ['R', 'f'], ['f', 'c'], ['C', '1'], ['Q', '']. */
export function splitName(name: string): [string, string] {
  const clean = name.replace(/[^\p{L}\p{N}_]/gu, '')
  const underscore = clean.indexOf('_')
  if (underscore > 0) return [clean.slice(0, underscore), clean.slice(underscore + 1).replace(/_/g, ',')]
  if (/^[RCLU](?=[\p{L}\p{N}])/u.test(clean)) return [clean[0]!, clean.slice(1)]
  const digits = /^(\p{L}+)(\d+)$/u.exec(clean)
  return digits ? [digits[1]!, digits[2]!] : [clean, '']
}

interface Piece {
  text: string
  power: number
}

const wrap = (piece: Piece, least: number) => (piece.power < least ? `\\left(${piece.text}\\right)` : piece.text)

function tex(tree: Tree): Piece {
  switch (tree.type) {
    case 'number':
      return { text: numberTex(tree), power: POWER.atom }
    case 'name':
      return { text: nameTex(tree.name), power: POWER.atom }
    case 'opamp':
      return { text: `${nameTex(tree.datum)}(\\mathrm{${tree.ref.replace(/\W|_/g, '')}})`, power: POWER.atom }
    case 'minus':
      return { text: `-${wrap(tex(tree.arg), POWER.product)}`, power: POWER.sum }
    case 'not':
      return { text: `\\neg\\left(${tex(tree.arg).text}\\right)`, power: POWER.comparison }
    case 'logic':
      return { text: `${tex(tree.left).text}\\;\\text{${tree.operator}}\\;${tex(tree.right).text}`, power: 0 }
    case 'comparison':
      return {
        text: `${tex(tree.left).text} ${COMPARISONS[tree.operator]} ${tex(tree.right).text}`,
        power: POWER.comparison,
      }
    case 'call':
      return callTex(tree)
    case 'arithmetic':
      return arithmeticTex(tree)
  }
}

const COMPARISONS = { '<': '<', '<=': '\\le', '>': '>', '>=': '\\ge', '==': '=', '!=': '\\ne' }

function numberTex(tree: Tree & { type: 'number' }): string {
  if (!tree.unit && !tree.prefixed)
    return /e/i.test(tree.text) ? tree.text.replace(/e\+?(-?\d+)/i, '\\cdot 10^{$1}') : tree.text
  const shown = formatQuantity(tree.unit === '%' ? 100 * tree.value : tree.value, tree.unit ?? 'Ω', { trim: true })
  const [number = '', unit = ''] = shown.split('\u2009')
  const letters = (tree.unit ? unit : unit.replace('Ω', ''))
    .replace('µ', '\\text{µ}')
    .replace('Ω', '\\Omega')
    .replace('%', '\\%')
  return letters ? `${number}\\,\\mathrm{${letters}}` : number
}

function arithmeticTex(tree: Tree & { type: 'arithmetic' }): Piece {
  // A sign stands before the fraction or product, not inside it.
  if ((tree.operator === '*' || tree.operator === '/') && tree.left.type === 'minus')
    return { text: `-${arithmeticTex({ ...tree, left: tree.left.arg }).text}`, power: POWER.sum }
  const left = tex(tree.left)
  const right = tex(tree.right)
  switch (tree.operator) {
    case '+':
      return { text: `${left.text} + ${wrap(right, POWER.sum)}`, power: POWER.sum }
    case '-':
      return { text: `${left.text} - ${wrap(right, POWER.product)}`, power: POWER.sum }
    case '*':
      return {
        text: `${wrap(left, POWER.product)}${productSign(tree.right)}${wrap(right, POWER.product)}`,
        power: POWER.product,
      }
    case '/':
      return { text: `\\frac{${left.text}}{${right.text}}`, power: POWER.product }
    case '^':
      return { text: `${wrap(left, POWER.atom)}^{${right.text}}`, power: POWER.power }
  }
}

/** A thin space between letters; a dot before a number. */
const productSign = (right: Tree) =>
  right.type === 'number' || (right.type === 'arithmetic' && right.left.type === 'number') ? ' \\cdot ' : '\\,'

function callTex(tree: Tree & { type: 'call' }): Piece {
  const args = tree.args.map(tex)
  const first = args[0]!.text
  switch (tree.name) {
    case 'sqrt':
      return { text: `\\sqrt{${first}}`, power: POWER.atom }
    case 'abs':
      return { text: `\\left|${first}\\right|`, power: POWER.atom }
    case 'exp':
      return { text: `\\mathrm{e}^{${first}}`, power: POWER.power }
    case 'par':
      return { text: args.map((one) => wrap(one, POWER.product)).join(' \\parallel '), power: POWER.comparison }
    case 'ser':
      return { text: args.map((one) => one.text).join(' + '), power: POWER.sum }
    case 'dB':
      return { text: `20\\log_{10}\\left|${first}\\right|`, power: POWER.product }
    case 'log10':
      return { text: `\\log_{10}\\left(${first}\\right)`, power: POWER.product }
    case 'atan':
    case 'atan2':
      return {
        text: `\\operatorname{${tree.name}}\\left(${args.map((one) => one.text).join(', ')}\\right)`,
        power: POWER.product,
      }
    default:
      return { text: `\\${tree.name}\\left(${args.map((one) => one.text).join(', ')}\\right)`, power: POWER.product }
  }
}

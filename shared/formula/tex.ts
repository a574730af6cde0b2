import type { Unit } from '../quantities/unit'
import { UNIT_MULTIPLES, UNIT_SPELLINGS } from '../quantities/unit'
import type { Formula } from './parse'
import type { Tree } from './tree'
import type { FunctionName } from './vocabulary'

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
const POWER = { or: 1, and: 2, comparison: 3, parallel: 4, sum: 5, product: 6, power: 7, atom: 8 }

/** Names typeset in place of the names computed with, such as the symbol of a result. */
type Symbols = Readonly<Record<string, string>>

/**
 * Typesets a formula from the tree that computes.
 * @param symbols names to show in place of some of the names
 * @returns TeX built from letters, digits and commands of this file alone
 * @example formulaTex(formula) // '\\frac{1}{2\\,\\pi\\,R_{\\mathrm{f}}\\,C_{\\mathrm{f}}}'
 */
export const formulaTex = (formula: Formula, symbols: Symbols = {}): string => tex(formula.tree, symbols).text

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
  const clean = name.replace(/[^\p{L}\p{N}_]/gu, '').replace(/^_+|_+$/g, '')
  const underscore = clean.indexOf('_')
  if (underscore > 0) return [clean.slice(0, underscore), clean.slice(underscore + 1).replace(/_/g, ',')]
  if (/^[RCLU](?=[\p{L}\p{N}])/u.test(clean)) return [clean[0]!, clean.slice(1)]
  const digits = /^(\p{L}+)(\d+)$/u.exec(clean)
  return digits ? [digits[1]!, digits[2]!] : [clean, '']
}

interface Piece {
  text: string
  power: number
  /** Ends in a unit, so that a factor after it needs a dot. */
  endsInUnit?: boolean
  /** The same without the sign that it begins with. */
  unsigned?: Piece
}

const negative = (unsigned: Piece): Piece => ({ text: `-${unsigned.text}`, power: POWER.sum, unsigned })

const inParentheses = (piece: Piece) => `\\left(${piece.text}\\right)`
const wrap = (piece: Piece, least: number) => (piece.power < least ? inParentheses(piece) : piece.text)

const COMPARISONS = { '<': '<', '<=': '\\le', '>': '>', '>=': '\\ge', '==': '=', '!=': '\\ne' }

function tex(tree: Tree, symbols: Symbols): Piece {
  switch (tree.type) {
    case 'number':
      return numberTex(tree)
    case 'name':
      return { text: nameTex(Object.hasOwn(symbols, tree.name) ? symbols[tree.name]! : tree.name), power: POWER.atom }
    case 'opamp':
      return { text: `${nameTex(tree.datum)}(\\mathrm{${tree.ref.replace(/\W|_/g, '')}})`, power: POWER.product }
    case 'minus': {
      const arg = tex(tree.arg, symbols)
      return negative(arg.power < POWER.product ? { text: inParentheses(arg), power: POWER.atom } : arg)
    }
    case 'not':
      return { text: `\\neg${inParentheses(tex(tree.arg, symbols))}`, power: POWER.comparison }
    case 'logic': {
      const sides = [tree.left, tree.right].map((one) => wrap(tex(one, symbols), POWER[tree.operator]))
      return { text: sides.join(`\\;\\text{${tree.operator}}\\;`), power: POWER[tree.operator] }
    }
    case 'comparison': {
      const sides = [tree.left, tree.right].map((one) => tex(one, symbols).text)
      return { text: sides.join(` ${COMPARISONS[tree.operator]} `), power: POWER.comparison }
    }
    case 'call':
      return callTex(
        tree.name,
        tree.args.map((arg) => tex(arg, symbols)),
      )
    case 'arithmetic':
      return arithmeticTex(tree, symbols)
  }
}

function arithmeticTex(tree: Tree & { type: 'arithmetic' }, symbols: Symbols): Piece {
  const left = tex(tree.left, symbols)
  const right = tex(tree.right, symbols)
  switch (tree.operator) {
    case '+':
      return { text: `${wrap(left, POWER.sum)} + ${addend(right)}`, power: POWER.sum }
    case '-':
      return { text: `${wrap(left, POWER.sum)} - ${wrap(right, POWER.product)}`, power: POWER.sum }
    case '^':
      return { text: `${wrap(left, POWER.atom)}^{${right.text}}`, power: POWER.power }
    default: {
      // A sign stands before the fraction or product, not inside it.
      const join = tree.operator === '*' ? product : fraction
      return left.unsigned ? negative(join(left.unsigned, right)) : join(left, right)
    }
  }
}

const fraction = (above: Piece, below: Piece): Piece => ({
  text: `\\frac{${above.text}}{${below.text}}`,
  power: POWER.product,
})

/** A thin space between letters; a dot before a number and after a unit. */
function product(left: Piece, right: Piece): Piece {
  const [first, second] = [wrap(left, POWER.product), wrap(right, POWER.product)]
  const dotted = /^[\d.]/.test(second) || (left.endsInUnit && left.power >= POWER.product)
  const endsInUnit = right.endsInUnit && right.power >= POWER.product
  return { text: first + (dotted ? ' \\cdot ' : '\\,') + second, power: POWER.product, endsInUnit }
}

/** What stands after a plus: a sign there goes into parentheses. */
const addend = (piece: Piece) =>
  piece.power < POWER.sum || piece.text.startsWith('-') ? inParentheses(piece) : piece.text

function callTex(name: FunctionName, args: Piece[]): Piece {
  const first = args[0]!.text
  const list = args.map((one) => one.text).join(', ')
  switch (name) {
    case 'sqrt':
      return { text: `\\sqrt{${first}}`, power: POWER.atom }
    case 'abs':
      return { text: `\\left|${first}\\right|`, power: POWER.atom }
    case 'exp':
      return { text: `\\mathrm{e}^{${first}}`, power: POWER.power }
    case 'par':
      return { text: args.map((one) => wrap(one, POWER.product)).join(' \\parallel '), power: POWER.parallel }
    case 'ser':
      return {
        text: args.map((one, k) => (k === 0 ? wrap(one, POWER.sum) : addend(one))).join(' + '),
        power: POWER.sum,
      }
    case 'dB':
      return { text: `20\\log_{10}\\left|${first}\\right|`, power: POWER.product }
    case 'log10':
      return { text: `\\log_{10}\\left(${first}\\right)`, power: POWER.product }
    case 'atan':
    case 'atan2':
      return { text: `\\operatorname{${name}}\\left(${list}\\right)`, power: POWER.product }
    default:
      return { text: `\\${name}\\left(${list}\\right)`, power: POWER.product }
  }
}

/** A literal as written: the letter of a code becomes the decimal point and a prefix. */
function numberTex({ text, unit }: Tree & { type: 'number' }): Piece {
  const coded = /^(\d*)([TGMKkmµμunpRV])(\d*)$/.exec(text)
  const [, number = '', power = '', tail = ''] = coded
    ? ['', `${coded[1] || '0'}${coded[3] ? `.${coded[3]}` : ''}`, '', coded[2]]
    : (/^([\d.]+)(?:[eE]\+?(-?\d+))? ?(.*)$/u.exec(text) ?? [])
  const scaled = power ? `${number}\\cdot 10^{${power}}` : number
  const letters = unitTex(tail, unit)
  if (letters === '') return { text: scaled, power: power ? POWER.product : POWER.atom }
  return { text: `${scaled}\\,\\mathrm{${letters}}`, power: POWER.product, endsInUnit: true }
}

/** Prefix and unit in the symbols of the SI, whatever the spelling typed. */
function unitTex(tail: string, unit: Unit | null): string {
  if (tail === '' || tail === '%' || tail === 'ppm') return tail.replace('%', '\\%')
  const prefix = /^(?:meg|[TGMkKmµμunpf])/u.exec(unit ? withoutUnit(tail, unit) : tail)?.[0] ?? ''
  const symbol = unit === 'V/s' ? `V/${slewTime(tail)}s` : (unit ?? '')
  return `${PREFIX_TEX[prefix] ?? prefix}${symbol.replace('µ', MICRO).replace('Ω', '\\Omega').replace('√Hz', '\\sqrt{Hz}')}`
}

const MICRO = '\\mu '
const PREFIX_TEX: Record<string, string> = { meg: 'M', K: 'k', u: MICRO, µ: MICRO, μ: MICRO }

const slewTime = (tail: string) => (/V\/[µμu]s$/.test(tail) ? 'µ' : tail.endsWith('/ms') ? 'm' : '')

function withoutUnit(tail: string, unit: Unit): string {
  const spellings = [...UNIT_SPELLINGS[unit], ...Object.keys(UNIT_MULTIPLES[unit] ?? {}), 'R']
  const spelled = spellings.filter((one) => tail.endsWith(one)).sort((a, b) => b.length - a.length)[0] ?? ''
  return tail.slice(0, tail.length - spelled.length).trim()
}

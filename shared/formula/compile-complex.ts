import { ProblemError } from '../problems'
import { slotFinder } from './compile'
import type { Formula } from './parse'
import type { Tree } from './tree'
import { wholeExponent } from './tree'
import type { FunctionName } from './vocabulary'
import { CONSTANTS } from './vocabulary'

/** Evaluates at s = sRe + j·sIm into out[0] (real) and out[1] (imaginary). */
export type EvaluateComplex = (values: Float64Array, sRe: number, sIm: number, out: Float64Array) => void

/** One node's work: reads the vector and s, leaves its value in its own register. */
type Run = (values: Float64Array, sRe: number, sIm: number) => void

/**
 * Compiles a response formula H(s) into closures over registers.
 * @param names what each place of the vector holds
 * @throws {ProblemError} 'formula-not-read' when a name is not in the vector or a power is not a whole number
 */
export function compileComplexFormula(formula: Formula, names: readonly string[]): EvaluateComplex {
  const builder = new ComplexBuilder(formula.text, names)
  const top = builder.build(formula.tree)
  const re = Float64Array.from(builder.re)
  const im = Float64Array.from(builder.im)
  const run = top.run(re, im)
  return (values, sRe, sIm, out) => {
    run(values, sRe, sIm)
    out[0] = re[top.register]!
    out[1] = im[top.register]!
  }
}

interface Built {
  register: number
  run: (re: Float64Array, im: Float64Array) => Run
}

class ComplexBuilder {
  readonly re: number[] = []
  readonly im: number[] = []
  private readonly slotOf

  constructor(text: string, names: readonly string[]) {
    this.slotOf = slotFinder(text, names)
  }

  private register(re = 0, im = 0): number {
    this.re.push(re)
    this.im.push(im)
    return this.re.length - 1
  }

  build(tree: Tree): Built {
    switch (tree.type) {
      case 'number':
        return { register: this.register(tree.value), run: () => () => {} }
      case 'name':
        return this.name(tree.name, tree.column)
      case 'minus':
        return this.unary(tree.arg, (re, im, to, a) => {
          re[to] = -re[a]!
          im[to] = -im[a]!
        })
      case 'call':
        return this.call(tree.name, tree.args)
      case 'arithmetic':
        return tree.operator === '^'
          ? this.power(tree.left, tree.right)
          : this.binary(tree.left, tree.right, BINARY[tree.operator])
      default:
        throw new ProblemError('formula-not-read', 'A response is built from numbers, names and arithmetic.', {
          line: 1,
          column: 1,
        })
    }
  }

  private name(name: string, column: number): Built {
    if (name === 's') {
      const register = this.register()
      return {
        register,
        run: (re, im) => (_v, sRe, sIm) => {
          re[register] = sRe
          im[register] = sIm
        },
      }
    }
    if (Object.hasOwn(CONSTANTS, name))
      return { register: this.register((CONSTANTS as Record<string, number>)[name]), run: () => () => {} }
    const slot = this.slotOf(name, column)
    const register = this.register()
    return { register, run: (re) => (v) => void (re[register] = v[slot]!) }
  }

  private unary(arg: Tree, work: (re: Float64Array, im: Float64Array, to: number, a: number) => void): Built {
    const a = this.build(arg)
    const register = this.register()
    return {
      register,
      run: (re, im) => {
        const first = a.run(re, im)
        return (v, sRe, sIm) => {
          first(v, sRe, sIm)
          work(re, im, register, a.register)
        }
      },
    }
  }

  private binary(left: Tree, right: Tree, work: BinaryWork): Built {
    const a = this.build(left)
    const b = this.build(right)
    const register = this.register()
    return {
      register,
      run: (re, im) => {
        const first = a.run(re, im)
        const second = b.run(re, im)
        return (v, sRe, sIm) => {
          first(v, sRe, sIm)
          second(v, sRe, sIm)
          work(re, im, register, a.register, b.register)
        }
      },
    }
  }

  private power(base: Tree, exponent: Tree): Built {
    const n = wholeExponent(exponent)
    if (n === null)
      throw new ProblemError('formula-not-read', 'A power in a response is a whole number up to 20, such as s^2.', {
        line: 1,
        column: 1,
      })
    return this.unary(base, (re, im, to, a) => {
      let x = 1
      let y = 0
      for (let k = 0; k < Math.abs(n); k++) [x, y] = [x * re[a]! - y * im[a]!, x * im[a]! + y * re[a]!]
      if (n < 0) divide(re, im, to, 1, 0, x, y)
      else {
        re[to] = x
        im[to] = y
      }
    })
  }

  private call(name: FunctionName, args: Tree[]): Built {
    const [first, ...rest] = args as [Tree, ...Tree[]]
    if (name === 'sqrt')
      return this.unary(first, (re, im, to, a) => {
        const size = Math.hypot(re[a]!, im[a]!)
        const x = Math.sqrt((size + Math.abs(re[a]!)) / 2)
        const y = x === 0 ? 0 : im[a]! / (2 * x)
        const [p, q] = re[a]! >= 0 ? [x, y] : [Math.abs(y), im[a]! < 0 ? -x : x]
        re[to] = p
        im[to] = q
      })
    if (name === 'exp')
      return this.unary(first, (re, im, to, a) => {
        const size = Math.exp(re[a]!)
        const angle = im[a]!
        re[to] = size * Math.cos(angle)
        im[to] = size * Math.sin(angle)
      })
    const one: Tree = { type: 'number', value: 1, unit: null, prefixed: false, text: '1', column: 1 }
    const over = (tree: Tree): Tree => ({ type: 'arithmetic', operator: '/', left: one, right: tree })
    const sum = (trees: Tree[]): Tree =>
      trees.reduce((left, right) => ({ type: 'arithmetic', operator: '+', left, right }))
    return this.build(name === 'ser' ? sum([first, ...rest]) : over(sum([first, ...rest].map(over))))
  }
}

type BinaryWork = (re: Float64Array, im: Float64Array, to: number, a: number, b: number) => void

/**
 * Quotient of two complex numbers, scaled so that squares neither overflow nor vanish. Division by zero gives a real
 * infinity, so that 1/(s*C) at s = 0 is an open circuit.
 * Source: R. L. Smith, Algorithm 116, Comm. ACM 5 (1962) 435.
 */
function divide(re: Float64Array, im: Float64Array, to: number, a: number, b: number, c: number, d: number) {
  if (c === 0 && d === 0) {
    re[to] = a === 0 && b === 0 ? NaN : Infinity
    im[to] = 0
  } else if (Math.abs(c) >= Math.abs(d)) {
    const ratio = d / c
    const size = c + d * ratio
    re[to] = (a + b * ratio) / size
    im[to] = (b - a * ratio) / size
  } else {
    const ratio = c / d
    const size = c * ratio + d
    re[to] = (a * ratio + b) / size
    im[to] = (b * ratio - a) / size
  }
}

const BINARY: Record<'+' | '-' | '*' | '/', BinaryWork> = {
  '+': (re, im, to, a, b) => {
    re[to] = re[a]! + re[b]!
    im[to] = im[a]! + im[b]!
  },
  '-': (re, im, to, a, b) => {
    re[to] = re[a]! - re[b]!
    im[to] = im[a]! - im[b]!
  },
  '*': (re, im, to, a, b) => {
    const x = re[a]! * re[b]! - im[a]! * im[b]!
    im[to] = re[a]! * im[b]! + im[a]! * re[b]!
    re[to] = x
  },
  '/': (re, im, to, a, b) => divide(re, im, to, re[a]!, im[a]!, re[b]!, im[b]!),
}

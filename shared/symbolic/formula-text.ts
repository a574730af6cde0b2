import type { Tree } from '../formula/tree'

const STRENGTH = { '+': 1, '-': 1, '*': 2, '/': 2, '^': 4 } as const

/** Names and whole numbers as trees of the formula language, and their joints. */
export const nameTree = (name: string): Tree => ({ type: 'name', name, column: 1 })
export const wholeTree = (value: bigint): Tree => ({
  type: 'number',
  value: Number(value),
  unit: null,
  prefixed: false,
  text: String(value),
  column: 1,
})
export const joined = (left: Tree, operator: '+' | '-' | '*' | '/' | '^', right: Tree): Tree => ({
  type: 'arithmetic',
  operator,
  left,
  right,
})

/**
 * A tree of names, whole numbers and arithmetic as text of the formula language, which is mathjs syntax. Quotients in
 * products are put in parentheses, as they are read.
 * @example treeText(tree) // '-(R2/R1)/(1 + s*R2*C2)'
 */
export function treeText(tree: Tree): string {
  switch (tree.type) {
    case 'number':
      return tree.text
    case 'name':
      return tree.name
    case 'minus':
      return `-${strengthOf(tree.arg) < 2 ? `(${treeText(tree.arg)})` : treeText(tree.arg)}`
    case 'arithmetic': {
      const { operator, left, right } = tree
      const strength = STRENGTH[operator]
      const spaced = strength === 1 ? ` ${operator} ` : operator
      return wrapped(left, isQuotient(left) && strength === 2 ? 3 : strength) + spaced + wrapped(right, strength + 1)
    }
    default:
      throw new TypeError(`A ${tree.type} is no arithmetic.`)
  }
}

const isQuotient = (tree: Tree) => tree.type === 'arithmetic' && tree.operator === '/'

function strengthOf(tree: Tree): number {
  if (tree.type === 'arithmetic') return STRENGTH[tree.operator]
  return tree.type === 'minus' ? 1 : 5
}

const wrapped = (tree: Tree, least: number) => (strengthOf(tree) < least ? `(${treeText(tree)})` : treeText(tree))

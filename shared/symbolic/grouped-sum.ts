import type { Tree } from '../formula/tree'
import { factored } from './factors'
import { joined, nameTree, wholeTree } from './formula-text'
import type { Polynomial } from './polynomial'
import { ZERO, addScaled, constant, exponentsOf, powerOf, timesTerm } from './polynomial'

/** Names of the variables; 0 is s, and those of capacitors and inductors are `reactive`. */
export interface Variables {
  names: readonly string[]
  reactive: ReadonlySet<number>
}

/** A signed piece of a sum: the sign stands apart, so that it becomes the operator. */
export interface Signed {
  negative: boolean
  tree: Tree
}

/** Exponents by variable; negative ones are under the bar. */
type Powers = number[]

/** A product of variables and a whole number over another such product; null where it is 1. */
export function monomialTree(variables: Variables, whole: bigint, powers: Powers): Tree | null {
  const above = productOf([
    ...(whole === 1n ? [] : [wholeTree(whole)]),
    ...powers.flatMap((k, i) => (k > 0 ? [powerTree(variables.names[i]!, k)] : [])),
  ])
  const below = productOf(powers.flatMap((k, i) => (k < 0 ? [powerTree(variables.names[i]!, -k)] : [])))
  return below ? joined(above ?? wholeTree(1n), '/', below) : above
}

/** s·(2·a·b/c) as 2·s·a·b/c. */
export function timesTree(factor: Tree, tree: Tree): Tree {
  if (tree.type === 'number') return joined(tree, '*', factor)
  if (tree.type !== 'arithmetic' || (tree.operator !== '*' && tree.operator !== '/')) return joined(factor, '*', tree)
  if (tree.operator === '/' && tree.left.type === 'number' && tree.left.value === 1)
    return joined(factor, '/', tree.right)
  return joined(timesTree(factor, tree.left), tree.operator, tree.right)
}

const powerTree = (name: string, k: number) =>
  k === 1 ? nameTree(name) : joined(nameTree(name), '^', wholeTree(BigInt(k)))

/** Null when there is nothing to multiply. */
export function productOf(trees: readonly Tree[]): Tree | null {
  const [first, ...rest] = trees
  return first
    ? rest.reduce((left, right) => (isProduct(right) ? timesTree(left, right) : joined(left, '*', right)), first)
    : null
}

const isProduct = (tree: Tree) => tree.type === 'arithmetic' && tree.operator === '*'

/** A sum that begins with 1, or else with a plus, where it can. */
export function sumOf(pieces: readonly Signed[]): Tree {
  const positive = pieces.filter((one) => !one.negative)
  const first = positive.find(({ tree }) => tree.type === 'number') ?? positive[0] ?? pieces[0]!
  return pieces
    .filter((one) => one !== first)
    .reduce<Tree>(
      (left, { negative, tree }) => joined(left, negative ? '-' : '+', tree),
      first.negative ? { type: 'minus', arg: first.tree } : first.tree,
    )
}

/**
 * A polynomial over a product of variables, as it is read: products in front, sums factored, quotients inside a sum
 * where the divisor occurs in it: (R1*R2 + R1*R3 + R2*R3)/R1 becomes R2 + R3 + R2*R3/R1. Without s.
 *
 * @param over the divisor, a monomial
 * @returns with tree null where it is 1 but for the sign
 */
export function groupedSum(
  p: Polynomial,
  over: bigint,
  variables: Variables,
): { negative: boolean; tree: Tree | null } {
  const { whole, monomial, factors } = factored(p)
  const powers = quotientPowers(monomial, over, variables)
  const sums = factors.map((factor) => {
    const taken = powers.map((k, i) => (k < 0 && [...factor.keys()].some((m) => (exponentsOf(m)[i] ?? 0) > 0) ? k : 0))
    taken.forEach((k, i) => (powers[i] = powers[i]! - k))
    return termsTree(factor, taken, variables)
  })
  const positive = whole < 0n ? -whole : whole
  const above = [
    ...(positive === 1n ? [] : [wholeTree(positive)]),
    ...powers.flatMap((k, i) => (k > 0 ? [powerTree(variables.names[i]!, k)] : [])),
    ...sums,
  ]
  const below = productOf(powers.flatMap((k, i) => (k < 0 ? [powerTree(variables.names[i]!, -k)] : [])))
  const product = productOf(above)
  return { negative: whole < 0n, tree: below ? joined(product ?? wholeTree(1n), '/', below) : product }
}

/** Exponents of a quotient of monomials. */
export function quotientPowers(above: bigint, below: bigint, { names }: Variables): Powers {
  const [a, b] = [exponentsOf(above), exponentsOf(below)]
  return names.map((_, k) => (a[k] ?? 0) - (b[k] ?? 0))
}

/** A sum with its terms put together by their capacitors and inductors, times a product of powers; without s. */
export function termsTree(p: Polynomial, times: Powers, variables: Variables): Tree {
  const groups = new Map<bigint, Polynomial>()
  for (const [monomial, coefficient] of p) {
    const reactive = exponentsOf(monomial).reduce(
      (product, k, i) => (variables.reactive.has(i) ? product + powerOf(i, k) : product),
      0n,
    )
    const term = timesTerm(constant(coefficient), monomial - reactive)
    groups.set(reactive, addScaled(groups.get(reactive) ?? ZERO, term))
  }
  const below = times.reduce((product, k, i) => product + powerOf(i, -k), 0n)
  if (groups.size === 1) return sumOf(termPieces(p, below, variables))
  return sumOf(
    [...groups].sort(byMonomial).flatMap(([reactive, sum]): Signed[] => {
      if (reactive === 0n) return termPieces(sum, below, variables)
      const { negative, tree } = groupedSum(timesTerm(sum, reactive), below, variables)
      return [{ negative, tree: tree ?? wholeTree(1n) }]
    }),
  )
}

const termPieces = (p: Polynomial, below: bigint, variables: Variables): Signed[] =>
  [...p].sort(byMonomial).map(([monomial, coefficient]) => ({
    negative: coefficient < 0n,
    tree:
      monomialTree(
        variables,
        coefficient < 0n ? -coefficient : coefficient,
        quotientPowers(monomial, below, variables),
      ) ?? wholeTree(1n),
  }))

/** R1 before R2. */
const byMonomial = ([a]: [bigint, unknown], [b]: [bigint, unknown]): number => {
  const [x, y] = [exponentsOf(a), exponentsOf(b)]
  for (let k = 0; k < Math.max(x.length, y.length); k++) {
    const difference = (y[k] ?? 0) - (x[k] ?? 0)
    if (difference) return difference
  }
  return 0
}

import type { Formula } from '../formula/parse'
import { formulaTex } from '../formula/tex'
import type { Tree } from '../formula/tree'
import { factored } from './factors'
import { joined, nameTree, treeText, wholeTree } from './formula-text'
import type { Signed, Variables } from './grouped-sum'
import { groupedSum, monomialTree, productOf, quotientPowers, sumOf, termsTree, timesTree } from './grouped-sum'
import type { Polynomial } from './polynomial'
import { coefficientsIn, commonMonomial, exponentIn, timesTerm, variablesOf } from './polynomial'

/**
 * A ratio as it is read: −(R2/R1)/(1 + s·C2·(R2 + R3 + R2·R3/R1) + s²·R2·R3·C1·C2). Every factor runs in ascending
 * powers of s and begins with 1 where its lowest coefficient is a product; what is divided out stands in front.
 */
export function readingForm(
  numerator: Polynomial,
  denominator: Polynomial,
  variables: Variables,
): { text: string; tex: string } {
  if (numerator.size === 0) return { text: '0', tex: '0' }
  const [above, below] = [factored(numerator), factored(denominator)]
  const [sumsAbove, sumsBelow] = [above.factors, below.factors].map((list) =>
    [...list].sort(byFirstPart).map(withUnitStart),
  ) as [Started[], Started[]]
  const total = (first: bigint, sums: Started[]) => sums.reduce((product, { start }) => product + start, first)
  const powers = quotientPowers(total(above.monomial, sumsAbove), total(below.monomial, sumsBelow), variables)
  let negative = above.whole < 0n !== below.whole < 0n
  const turned = negative ? sumsAbove.find(({ sum }) => isDifference(sum)) : undefined
  if (turned) {
    turned.sum = timesTerm(turned.sum, 0n, -1n)
    negative = false
  }
  const [wholeAbove, wholeBelow] = [above.whole, below.whole].map((n) => (n < 0n ? -n : n)) as [bigint, bigint]
  // A sum of resistances takes the divisors that it holds: (R3 + R4)/R3 is read as 1 + R4/R3.
  const plain = sumsAbove
    .filter(({ sum }) => isFreeOfS(sum))
    .map(({ sum }) => {
      const taken = powers.map((k, i) => (k < 0 && holds(sum, i) ? k : 0))
      taken.forEach((k, i) => (powers[i] = powers[i]! - k))
      return termsTree(sum, taken, variables)
    })
  const sPower = powers[0]!
  // With nothing else below, s stands among the parts: 1/(s·R1·C1).
  if (sPower > 0 || sumsBelow.length > 0 || wholeBelow > 1n) powers[0] = 0
  const isRatio = powers.some((k) => k < 0)
  const gain = monomialTree(variables, wholeAbove, powers)
  const sTree = (k: number) => (k > 0 ? monomialTree(variables, 1n, [k]) : null)
  const listed = (...trees: (Tree | null)[]) => trees.filter((tree) => tree !== null)
  const rising = sumsAbove.filter(({ sum }) => !isFreeOfS(sum)).map((one) => risingTree(one, variables))
  const bottom = productOf([
    ...(wholeBelow === 1n ? [] : [wholeTree(wholeBelow)]),
    ...listed(powers[0] === 0 ? sTree(-sPower) : null),
    ...sumsBelow.map((one) => risingTree(one, variables)),
  ])
  const rest = [...listed(sTree(sPower)), ...plain, ...rising]
  const inFront = isRatio && bottom !== null
  const signed = (tree: Tree): Tree => (negative ? { type: 'minus', arg: tree } : tree)
  const over = (tree: Tree | null) => (bottom ? joined(tree ?? wholeTree(1n), '/', bottom) : (tree ?? wholeTree(1n)))
  const product = (parts: (Tree | null)[]) => productOf(listed(...parts))
  const sFirst = isRatio ? [gain, ...rest] : [sTree(sPower), gain, ...plain, ...rising]
  const textTree = signed(over(product(sFirst)))
  const texTree = inFront ? signed(joined(gain!, '*', over(productOf(rest)))) : textTree
  return { text: treeText(textTree), tex: treeTex(texTree) }
}

/** The formula language's own typesetting. */
const treeTex = (tree: Tree) =>
  formulaTex({ text: '', kind: 'response', tree, names: new Set(), opampData: [] } satisfies Formula)

interface Started {
  sum: Polynomial
  /** Monomial that its lowest coefficient is and by which it is divided when shown; else 1. */
  start: bigint
}

function withUnitStart(sum: Polynomial): Started {
  const lowest = coefficientsIn(sum, 0).find((coefficient) => coefficient.size > 0)!
  const single = lowest.size === 1 && [...lowest.values()][0] === 1n && !isFreeOfS(sum)
  return { sum, start: single ? commonMonomial(lowest) : 0n }
}

/** R1·R4 − R2·R3, which is as good turned round. */
const isDifference = (p: Polynomial) =>
  isFreeOfS(p) && [...p.values()].reduce((balance, c) => balance + (c > 0n ? 1 : -1), 0) === 0

const byFirstPart = (a: Polynomial, b: Polynomial) => firstPart(a) - firstPart(b)
const firstPart = (p: Polynomial) => variablesOf(p).find((variable) => variable > 0) ?? 0

const isFreeOfS = (p: Polynomial) => [...p.keys()].every((monomial) => exponentIn(monomial, 0) === 0)
const holds = (p: Polynomial, variable: number) => [...p.keys()].some((monomial) => exponentIn(monomial, variable) > 0)

/** In ascending powers of s. */
function risingTree({ sum, start }: Started, variables: Variables): Tree {
  const pieces = coefficientsIn(sum, 0).flatMap((coefficient, k): Signed[] => {
    if (coefficient.size === 0) return []
    const { negative, tree } = groupedSum(coefficient, start, variables)
    const s = nameTree('s')
    const factor = k === 0 ? null : k === 1 ? s : joined(s, '^', wholeTree(BigInt(k)))
    const product = factor && tree ? timesTree(factor, tree) : (factor ?? tree ?? wholeTree(1n))
    return [{ negative, tree: product }]
  })
  return sumOf(pieces)
}

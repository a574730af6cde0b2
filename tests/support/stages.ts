import { readFileSync } from 'node:fs'
import type { ComputeRequest, StageOutcome } from '#shared/contracts/compute'
import { readBlock } from '#shared/page-source/read-block'
import { valueOf } from '#shared/problems'
import { evaluateStage, readStageRequest } from '#shared/stage/index'
import type { Stage } from '#shared/stage/index'

/** A block of the first shelf with the check circuit that has the same parts. */
export const HOUSE_BLOCKS = [
  ['lp1-inv', 'lp1-inverting'],
  ['hp1-inv', 'hp1-inverting'],
  ['bp1-wide', 'bp-wide-inverting'],
  ['lp1-ni', 'lp1-noninverting-gain'],
  ['lp2-sku', 'lp2-sallen-key-unity'],
  ['lp2-mfb', 'lp2-mfb'],
] as const

export const seedPage = (code: string): string =>
  readFileSync(new URL(`../../content-seed/${code}.md`, import.meta.url), 'utf8')

export const stageOf = (code: string): Stage => valueOf(readBlock(seedPage(code))).stage

export const evaluated = (stage: Stage, request: ComputeRequest): StageOutcome =>
  evaluateStage(stage, valueOf(readStageRequest(stage, request)))

/** Largest relative error of the targets asked. */
export const worstErrorOf = ({ results }: StageOutcome): number =>
  Math.max(...Object.values(results).map((one) => Math.abs(one.relativeError ?? 0)))

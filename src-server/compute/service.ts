import type { ComputeAnswer, ComputeRequest } from '#shared/contracts/compute'
import { valueOf } from '#shared/problems'
import {
  ENGINE_VERSION,
  evaluateStage,
  plotFrequencies,
  readStageRequest,
  selfCheck,
  stageResponse,
} from '#shared/stage/index'
import type { BlockService } from '../blocks'

const DEFAULT_POINTS = 61

/** Computes a revision at what is asked, with the engine that the browser runs too. */
export function computeService({ blocks }: { blocks: BlockService }) {
  return {
    /** @throws {ProblemError} with the JSON pointer of each entry that could not be read */
    async compute(code: string, number: number | undefined, request: ComputeRequest): Promise<ComputeAnswer> {
      const revision = await blocks.revisionOf(code, number)
      const { stage } = blocks.stageOf(revision)
      const asked = valueOf(readStageRequest(stage, request))
      const outcome = evaluateStage(stage, asked)
      const frequenciesHz = request.frequenciesHz ?? plotFrequencies(stage, outcome.values, DEFAULT_POINTS)
      return {
        block: { code: revision.code, revision: revision.number },
        ...outcome,
        conditions: asked.conditions,
        response: stageResponse(stage, outcome.values, asked.conditions, asked.output, frequenciesHz),
        selfCheck: selfCheck(stage, outcome.values),
        engineVersion: ENGINE_VERSION,
      }
    },
  }
}
export type ComputeService = ReturnType<typeof computeService>

import type { z } from 'zod'
import type { CheckAgain, SaveSizing, Sizing, SizingList } from '#shared/contracts/sizings'
import { ProblemError, valueOf } from '#shared/problems'
import type { Stage, StageAsked } from '#shared/stage/index'
import {
  ENGINE_VERSION,
  evaluateStage,
  plotFrequencies,
  readStageRequest,
  selfCheck,
  stagePhase,
  stageResponse,
  testTable,
} from '#shared/stage/index'
import type { BlockService } from '../blocks'
import { titleBlockOf } from '../blocks'
import type { Database } from '../database'
import { isDuplicate, nextNumber } from '../database'
import type { SignedIn } from '../people'
import type { SizingRepository } from './repository'

interface Needs {
  database: Database
  blocks: BlockService
  sizings: SizingRepository
  baseUrl: string
  now: () => Date
}

type Asked = z.output<typeof SaveSizing>

/** Figures that differ by less are the same: the last digits of another machine's arithmetic. */
const SAME = 1e-12

export function sizingService({ database, blocks, sizings, baseUrl, now }: Needs) {
  const { queries } = database

  const open = async (number: number): Promise<Sizing> => {
    const row = await sizings.byNumber(queries, number)
    if (!row) throw new ProblemError('not-found', `There is no sizing S-${number} here.`)
    const revision = await blocks.keptRevision(row.code, row.revision)
    const { page } = blocks.stageOf(revision)
    const approved = await blocks.approvedNumber(row.code)
    const { sizing } = row
    return {
      number: `S-${sizing.number}`,
      titleBlock: sizing.titleBlock,
      statusNow: row.statusNow,
      withdrawnReason: row.withdrawnReason,
      newerRevision: approved !== null && approved > row.revision ? approved : null,
      asked: sizing.asked,
      outcome: sizing.outcome,
      conditions: sizing.conditions,
      opAmps: sizing.opAmps,
      limitsNotKept: sizing.limitsNotKept,
      note: sizing.note,
      reason: sizing.reason,
      response: sizing.response,
      phaseRad: sizing.phaseRad,
      testTable: sizing.testTable,
      selfCheck: sizing.selfCheck,
      engineVersion: sizing.engineVersion,
      savedBy: sizing.savedByName,
      savedAt: sizing.savedAt.toISOString(),
      link: `${baseUrl}/sizings/S-${sizing.number}`,
      circuit: page.circuit.text,
      calculator: page.calculator.text,
    }
  }

  return {
    open,

    /**
     * Saves for good. The browser's results are not taken over: the revision is computed again here. A repeated save
     * under the same client key finds the first.
     * @throws {ProblemError} 'limit-without-reason' when a limit is not kept and no reason is given
     */
    async save(asked: Asked, person: SignedIn, clientKey: string | null): Promise<Sizing> {
      const former = clientKey && (await sizings.byClientKey(queries, person.id, clientKey))
      if (former) return open(former)
      const revision = await blocks.revisionOf(asked.block, asked.revision)
      const { stage } = blocks.stageOf(revision)
      const read = valueOf(readStageRequest(stage, requestOf(asked)))
      const computed = computeSizing(stage, read)
      const limitsNotKept = computed.outcome.limits.filter((limit) => limit.level !== 'note')
      if (limitsNotKept.length && asked.reason === '')
        throw new ProblemError(
          'limit-without-reason',
          `A sizing outside a limit is saved with a reason. ${limitsNotKept.map((limit) => limit.say).join(' ')}`,
          { pointer: '#/reason' },
        )
      const { note, reason, ...kept } = asked
      try {
        const number = await database.transaction(async (tx) => {
          const next = await nextNumber(tx, 'S')
          await sizings.insert(tx, {
            ...computed,
            number: next,
            blockId: revision.blockId,
            revisionId: revision.id,
            titleBlock: titleBlockOf(revision, revision.number),
            asked: kept,
            conditions: read.conditions,
            opAmps: {},
            limitsNotKept,
            note,
            reason,
            savedById: person.id,
            savedByName: person.name,
            savedAt: now(),
            clientKey,
          })
          return next
        })
        return await open(number)
      } catch (error) {
        // The same save arrived twice at one moment: the first one stands.
        const first = clientKey && isDuplicate(error) ? await sizings.byClientKey(queries, person.id, clientKey) : null
        if (first) return open(first)
        throw error
      }
    },

    async list(
      query: { before?: number; limit: number; block?: string; mine?: boolean },
      person: SignedIn,
    ): Promise<SizingList> {
      const rows = await sizings.list(queries, {
        limit: query.limit + 1,
        ...(query.before !== undefined && { before: query.before }),
        ...(query.block !== undefined && { block: query.block }),
        ...(query.mine && { savedById: person.id }),
      })
      const shown = rows.slice(0, query.limit)
      return {
        rows: shown.map((row) => ({
          number: `S-${row.number}`,
          block: row.code,
          title: row.title,
          revision: row.revision,
          statusNow: row.statusNow,
          targets: Object.fromEntries(
            Object.entries(row.outcome.results).flatMap(([name, result]) =>
              result.target === undefined ? [] : [[name, result.target]],
            ),
          ),
          units: Object.fromEntries(
            Object.entries(row.outcome.results).flatMap(([name, result]) =>
              result.target === undefined ? [] : [[name, result.unit]],
            ),
          ),
          note: row.note,
          savedBy: row.savedByName,
          savedAt: row.savedAt.toISOString(),
        })),
        next: rows.length > query.limit ? String(shown.at(-1)!.number) : null,
      }
    },

    /** What today's engine gives differently at the stored values. Nothing stored is changed. */
    async checkAgain(number: number): Promise<CheckAgain> {
      const stored = await open(number)
      const revision = await blocks.keptRevision(stored.titleBlock.code, stored.titleBlock.revision)
      const { stage } = blocks.stageOf(revision)
      const outcome = evaluateStage(stage, {
        held: stored.outcome.values,
        targets: {},
        series: {},
        conditions: stored.conditions,
        output: stored.response.output,
        goodEnough: 0,
      })
      const response = stageResponse(
        stage,
        stored.outcome.values,
        stored.conditions,
        stored.response.output,
        stored.response.frequenciesHz,
      )
      const pairs: [string, number, number][] = [
        ...Object.entries(stored.outcome.results).map(([name, one]): [string, number, number] => [
          name,
          one.value,
          outcome.results[name]?.value ?? NaN,
        ]),
        ...stored.response.frequenciesHz.map((f, k): [string, number, number] => [
          `|H| at ${Number(f.toPrecision(4))} Hz`,
          Math.hypot(stored.response.re[k]!, stored.response.im[k]!),
          Math.hypot(response.re[k]!, response.im[k]!),
        ]),
      ]
      return {
        engineVersion: ENGINE_VERSION,
        storedEngineVersion: stored.engineVersion,
        differences: pairs
          .map(([name, was, is]) => ({
            name,
            stored: was,
            now: is,
            relative: Object.is(was, is) || was === is ? 0 : was === 0 ? NaN : Math.abs(is - was) / Math.abs(was),
          }))
          .filter((one) => !(one.relative <= SAME)),
      }
    },
  }
}
export type SizingService = ReturnType<typeof sizingService>

const requestOf = ({ values, targets, conditions, series, goodEnough }: Asked) => ({
  values,
  targets,
  conditions,
  series,
  goodEnough,
})

/** Everything of a sizing that the engine gives. */
function computeSizing(stage: Stage, asked: StageAsked) {
  const outcome = evaluateStage(stage, asked)
  const frequenciesHz = plotFrequencies(stage, outcome.values)
  return {
    outcome,
    response: stageResponse(stage, outcome.values, asked.conditions, asked.output, frequenciesHz),
    phaseRad: stagePhase(stage, outcome.values, asked.conditions, asked.output, frequenciesHz),
    testTable: testTable(stage, outcome.values, asked.conditions),
    selfCheck: selfCheck(stage, outcome.values),
    engineVersion: ENGINE_VERSION,
  }
}

import { computed, reactive, ref, shallowRef, toRaw, watch, type ComputedRef, type Ref } from 'vue'
import type { SelfCheck, StageOutcome } from '#shared/contracts/compute'
import type { Conditions } from '#shared/contracts/conditions'
import type { SeriesName } from '#shared/preferred-values/series'
import { ProblemError } from '#shared/problems'
import {
  curveFrequencies,
  defaultValues,
  evaluateStage,
  nothingAsked,
  plotFrequencies,
  selfCheck,
  stagePhase,
  stageResponse,
  type Stage,
  type StageAsked,
} from '#shared/stage/index'
import { plotScale } from '../components/plot/plot-scale'
import { useResting } from './use-resting'
import { emptyState, isEmptyState, type BenchState } from './stage-state'

/** Sets within this error count as equal on the page; a house rule. */
export const GOOD_ENOUGH = 0.005

export interface BenchCurve {
  frequenciesHz: number[]
  magnitudeDb: number[]
  phaseDegrees: number[]
}

export type Bench = ReturnType<typeof useBench>

const UNDO_MAX = 200
const CHECK_AFTER_MS = 120

/**
 * A stage while values are typed: everything that follows from them, in the same frame. State goes one way: fields call
 * hold, release, aim and condition; results are computed from the state.
 */
export function useBench(stage: Stage, start: BenchState = emptyState()) {
  const state = reactive<BenchState>(structuredClone(start))
  const past = shallowRef<BenchState[]>([])
  const future = shallowRef<BenchState[]>([])
  /** Part or result that is being edited, marked in the table and in the drawing. */
  const inUse = ref<string | null>(null)
  /** Sentences beside fields that hold something unreadable, by field. */
  const problems = reactive<Record<string, string>>({})
  const failure = shallowRef<ProblemError | null>(null)

  const asked = computed<StageAsked>(() => ({
    ...nothingAsked(stage),
    held: { ...state.held },
    targets: { ...state.targets },
    series: { ...state.series },
    conditions: { ...state.conditions },
    goodEnough: GOOD_ENOUGH,
  }))

  let last: StageOutcome = evaluateStage(stage, nothingAsked(stage))
  const outcome: ComputedRef<StageOutcome> = computed(() => {
    try {
      last = evaluateStage(stage, asked.value)
      failure.value = null
    } catch (error) {
      if (!(error instanceof ProblemError)) throw error
      failure.value = error
    }
    return last
  })
  const values = computed(() => outcome.value.values)

  /** Range of frequencies that the values ask for, and the one shown, which follows when typing rests. */
  const wantedRange = computed((): [number, number] => {
    const [fromHz = 1, toHz = 10] = plotFrequencies(stage, values.value, 2)
    return [fromHz, toHz]
  })
  const shownRange = useResting(wantedRange, (a, b) => a[0] === b[0] && a[1] === b[1])

  const curve = computed<BenchCurve>(() => {
    const at = values.value
    const { conditions, output } = asked.value
    const fromHz = Math.min(wantedRange.value[0], shownRange.value[0])
    const toHz = Math.max(wantedRange.value[1], shownRange.value[1])
    const frequenciesHz = curveFrequencies(stage, at, fromHz, toHz)
    const { re, im } = stageResponse(stage, at, conditions, output, frequenciesHz)
    return {
      frequenciesHz,
      magnitudeDb: re.map((x, k) => 20 * Math.log10(Math.hypot(x, im[k]!))),
      phaseDegrees: stagePhase(stage, at, conditions, output, frequenciesHz).map((rad) => (180 * rad) / Math.PI),
    }
  })
  const wantedScale = computed(() => plotScale(wantedRange.value, curve.value.magnitudeDb, curve.value.phaseDegrees))
  const scale = useResting(wantedScale, (a, b) => JSON.stringify(a) === JSON.stringify(b))

  const check = useLateCheck(stage, values)

  /** Notes the state before a change, so that it can be taken back; changes of one field within a second are one. */
  let lastField = ''
  let lastAt = 0
  function remember(field: string) {
    const now = performance.now()
    if (field === lastField && now - lastAt < 1000) {
      lastAt = now
      return
    }
    lastField = field
    lastAt = now
    past.value = [...past.value.slice(-UNDO_MAX), snapshot(state)]
    future.value = []
  }

  function put(next: BenchState) {
    for (const group of ['held', 'targets', 'series', 'conditions'] as const) {
      for (const name of Object.keys(state[group])) delete (state[group] as Record<string, unknown>)[name]
      Object.assign(state[group], next[group])
    }
    for (const name of Object.keys(problems)) delete problems[name]
    lastField = ''
  }

  const move = (from: Ref<BenchState[]>, to: Ref<BenchState[]>) => {
    const next = from.value.at(-1)
    if (!next) return
    to.value = [...to.value, snapshot(state)]
    from.value = from.value.slice(0, -1)
    put(next)
  }

  const change = <K extends 'held' | 'targets' | 'series' | 'conditions'>(group: K, name: string, value: unknown) => {
    remember(`${group}.${name}`)
    const entries = state[group] as Record<string, unknown>
    if (value === undefined) delete entries[name]
    else entries[name] = value
  }

  return {
    stage,
    state,
    asked,
    outcome,
    values,
    curve,
    scale,
    check,
    failure,
    inUse,
    problems,
    isUntouched: computed(() => isEmptyState(state)),
    canUndo: computed(() => past.value.length > 0),
    canRedo: computed(() => future.value.length > 0),
    hold: (part: string, value: number) => change('held', part, value),
    release: (part: string) => change('held', part, undefined),
    aim: (result: string, value: number | undefined) => change('targets', result, value),
    setSeries: (part: string, series: SeriesName) => change('series', part, series),
    setCondition: (name: keyof Conditions, value: number | undefined) => change('conditions', name, value),
    /** Marks the part or result that is being edited. */
    use: (name: string) => void (inUse.value = name),
    leave: (name: string) => void (inUse.value === name && (inUse.value = null)),
    setProblem(field: string, sentence: string | null) {
      if (sentence) problems[field] = sentence
      else delete problems[field]
    },
    /** Puts a whole state in place, as one step that can be taken back. */
    replace(next: BenchState) {
      remember(`all ${performance.now()}`)
      put(structuredClone(toRaw(next)))
    },
    undo: () => move(past, future),
    redo: () => move(future, past),
    defaults: defaultValues(stage),
  }
}

const snapshot = (state: BenchState): BenchState =>
  structuredClone({
    ...toRaw(state),
    held: { ...state.held },
    targets: { ...state.targets },
    series: { ...state.series },
    conditions: { ...state.conditions },
  })

/** The self-check follows a moment after typing rests; until then the former one is marked as such. */
function useLateCheck(stage: Stage, values: Ref<Record<string, number>>) {
  const result = shallowRef<SelfCheck | null>(null)
  const isCurrent = ref(false)
  let timer: ReturnType<typeof setTimeout> | undefined
  watch(
    values,
    () => {
      isCurrent.value = false
      clearTimeout(timer)
      timer = setTimeout(() => {
        result.value = selfCheck(stage, values.value)
        isCurrent.value = true
      }, CHECK_AFTER_MS)
    },
    { immediate: true },
  )
  return { result, isCurrent }
}

/** What the search needs of a calculator's recipe. Slots are places in one vector of parts and results. */
export interface SearchPart {
  slot: number
  /** Stock values, ascending, SI. */
  stock: number[]
  kind: 'resistor' | 'capacitor' | 'inductor'
}

export interface FreePick extends SearchPart {
  /** Start value from the targets, before it is put on stock. */
  start: (env: Float64Array) => number
}

export interface Requirement {
  holds: (env: Float64Array) => boolean
  /** Slot of the target that the requirement names, with its nearest feasible value. */
  target?: number
  nearest?: (env: Float64Array) => number
}

export interface Step extends SearchPart {
  formula: (env: Float64Array) => number
  round: 'nearest' | 'up' | 'down'
  requirements: Requirement[]
}

export interface SearchTarget {
  slot: number
  value: number
  /** Asked for, or only standing in for one that was not. */
  asked: boolean
  formula: (env: Float64Array) => number
  /** Slots that the formula reads. */
  uses: ReadonlySet<number>
}

export interface SizingProblem {
  /** Length of the vector; held parts, conditions and stand-in values are already in `start`. */
  start: Float64Array
  free: FreePick[]
  steps: Step[]
  /** Parts that keep the value in `start`, though the recipe would size them. */
  held: number
  targets: SearchTarget[]
  /** Relative error within which sets count as equal. */
  goodEnough: number
}

export interface SizedSet {
  /** By slot of the sized parts. */
  values: Map<number, number>
  worstError: number
  impedanceOhm: number
  spread: number
}

export interface SizingOutcome {
  best: SizedSet | null
  /** What the recipe gave for each sized part of the best set before it was put on stock. */
  ideal: Map<number, number>
  runnersUp: SizedSet[]
  setsTried: number
  /** Requirements that no pick of the free parts could meet. */
  failed: { step: Step; requirement: Requirement; nearest?: number }[]
}

/** House range of impedances: inside it noise, bias current and strays are all small. Common practice. */
export const HOUSE_IMPEDANCE_OHM = { from: 1e3, to: 200e3 }
/** Below this, strays are a part of the capacitor. Common practice. */
export const HOUSE_LEAST_FARAD = 100e-12

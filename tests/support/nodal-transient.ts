/**
 * A small circuit simulator that knows nothing of timers: modified nodal analysis of resistors, capacitors, voltage and current
 * sources, stepped by the implicit trapezoidal rule with step doubling. What a closed form is judged by.
 */
export type Element =
  | { readonly kind: 'resistor'; readonly from: number; readonly to: number; readonly ohm: number }
  | { readonly kind: 'capacitor'; readonly from: number; readonly to: number; readonly farad: number; readonly startV: number }
  | { readonly kind: 'voltage'; readonly from: number; readonly to: number; readonly volt: number }
  /** Flows from `from` through the source to `to`. */
  | { readonly kind: 'current'; readonly from: number; readonly to: number; readonly ampere: number }

interface Watch {
  /** Node 0 is ground. */
  readonly node: number
  readonly riseToV: number
  readonly untilS: number
}

/** Per step, relative to the voltage watched: far below the 0.1 % that is asked of the law, even added up over thousands of steps. */
const STEP_ERROR = 1e-9

/** Seconds until a node first rises to a voltage, or `null` when it has not by `untilS`. */
export function firstRiseS(elements: readonly Element[], { node, riseToV, untilS }: Watch): number | null {
  let state = initial(elements)
  if (state.capacitorV.length !== 1) throw new Error('one capacitor at a time')
  let timeS = 0
  let stepS = untilS / 1e6
  while (timeS < untilS) {
    const whole = advance(elements, state, stepS)
    const half = advance(elements, state, stepS / 2)
    const twice = advance(elements, half, stepS / 2)
    const error = Math.abs((whole.nodeV[node] ?? 0) - (twice.nodeV[node] ?? 0)) / riseToV
    if (error > STEP_ERROR) {
      stepS /= 2
      continue
    }
    const after = twice.nodeV[node] ?? 0
    if (after >= riseToV) return timeS + crossingWithin(elements, state, { node, riseToV, stepS })
    timeS += stepS
    state = twice
    if (error < STEP_ERROR / 16) stepS *= 2
  }
  return null
}

interface State {
  readonly nodeV: readonly number[]
  readonly capacitorV: readonly number[]
  readonly capacitorA: readonly number[]
}

/** The crossing inside a step that is itself accurate: bisected with steps from its beginning. */
function crossingWithin(
  elements: readonly Element[],
  state: State,
  { node, riseToV, stepS }: { readonly node: number; readonly riseToV: number; readonly stepS: number },
): number {
  let [low, high] = [0, stepS]
  for (let round = 0; round < 60; round++) {
    const middle = (low + high) / 2
    const half = advance(elements, advance(elements, state, middle / 2), middle / 2)
    if ((half.nodeV[node] ?? 0) >= riseToV) high = middle
    else low = middle
  }
  return high
}

const initial = (elements: readonly Element[]): State => solve(elements, (_, startV) => ({ kind: 'held', volt: startV }))

/** Trapezoidal companion of a capacitor: a conductance 2 C / h beside a current of the step before. */
const advance = (elements: readonly Element[], state: State, stepS: number): State =>
  solve(elements, (index, _, farad) => {
    const siemens = (2 * farad) / stepS
    return { kind: 'companion', siemens, ampere: siemens * (state.capacitorV[index] ?? 0) + (state.capacitorA[index] ?? 0) }
  })

type Companion =
  { readonly kind: 'held'; readonly volt: number } | { readonly kind: 'companion'; readonly siemens: number; readonly ampere: number }

/** Kirchhoff's current law at every node and one row a voltage source. */
function solve(elements: readonly Element[], companion: (index: number, startV: number, farad: number) => Companion): State {
  const nodes = Math.max(...elements.flatMap((element) => [element.from, element.to]))
  const capacitors = elements.filter((element) => element.kind === 'capacitor')
  const models = capacitors.map((one, index) => companion(index, one.startV, one.farad))
  const held = models.filter((model) => model.kind === 'held').length
  const size = nodes + elements.filter((element) => element.kind === 'voltage').length + held
  const matrix = Array.from({ length: size }, () => new Array<number>(size).fill(0))
  const right = new Array<number>(size).fill(0)
  const put = (row: number, column: number, value: number) => {
    if (row > 0 && column > 0) (matrix[row - 1] as number[])[column - 1] = ((matrix[row - 1] as number[])[column - 1] ?? 0) + value
  }
  const conduct = (from: number, to: number, siemens: number) => {
    for (const [row, column, sign] of [
      [from, from, 1],
      [to, to, 1],
      [from, to, -1],
      [to, from, -1],
    ] as const)
      put(row, column, sign * siemens)
  }
  const inject = (row: number, ampere: number) => {
    if (row > 0) right[row - 1] = (right[row - 1] ?? 0) + ampere
  }
  let branch = nodes
  const hold = (from: number, to: number, volt: number): number => {
    branch += 1
    for (const [at, sign] of [
      [from, 1],
      [to, -1],
    ] as const) {
      put(at, branch, sign)
      put(branch, at, sign)
    }
    inject(branch, volt)
    return branch
  }
  const branches: number[] = []
  for (const element of elements) {
    const { from, to } = element
    if (element.kind === 'resistor') conduct(from, to, 1 / element.ohm)
    else if (element.kind === 'voltage') hold(from, to, element.volt)
    else if (element.kind === 'current') {
      inject(from, -element.ampere)
      inject(to, element.ampere)
    } else {
      const model = models[capacitors.indexOf(element)]
      if (model?.kind === 'held') branches.push(hold(from, to, model.volt))
      else if (model) {
        conduct(from, to, model.siemens)
        inject(from, model.ampere)
        inject(to, -model.ampere)
      }
    }
  }
  const x = gauss(matrix, right)
  const nodeV = [0, ...x.slice(0, nodes)]
  const capacitorV = capacitors.map(({ from, to }) => (nodeV[from] ?? 0) - (nodeV[to] ?? 0))
  const capacitorA = models.map((model, index) =>
    model.kind === 'held' ? (x[(branches[index] ?? 1) - 1] ?? 0) : model.siemens * (capacitorV[index] ?? 0) - model.ampere,
  )
  return { nodeV, capacitorV, capacitorA }
}

/** Elimination with partial pivoting. */
function gauss(matrix: number[][], right: number[]): readonly number[] {
  const size = right.length
  for (let pivot = 0; pivot < size; pivot++) {
    let best = pivot
    for (let row = pivot + 1; row < size; row++) if (Math.abs(at(matrix, row, pivot)) > Math.abs(at(matrix, best, pivot))) best = row
    ;[matrix[pivot], matrix[best]] = [matrix[best] as number[], matrix[pivot] as number[]]
    ;[right[pivot], right[best]] = [right[best] ?? 0, right[pivot] ?? 0]
    for (let row = pivot + 1; row < size; row++) {
      const factor = at(matrix, row, pivot) / at(matrix, pivot, pivot)
      if (factor === 0) continue
      for (let column = pivot; column < size; column++)
        (matrix[row] as number[])[column] = at(matrix, row, column) - factor * at(matrix, pivot, column)
      right[row] = (right[row] ?? 0) - factor * (right[pivot] ?? 0)
    }
  }
  const x = new Array<number>(size).fill(0)
  for (let row = size - 1; row >= 0; row--) {
    let sum = right[row] ?? 0
    for (let column = row + 1; column < size; column++) sum -= at(matrix, row, column) * (x[column] ?? 0)
    x[row] = sum / at(matrix, row, row)
  }
  return x
}
const at = (matrix: readonly (readonly number[])[], row: number, column: number): number => matrix[row]?.[column] ?? 0

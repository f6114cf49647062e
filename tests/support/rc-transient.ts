/** An independent judge of the monostable: the node's differential equation stepped by Runge-Kutta, with no closed form in it. */
export interface RcNode {
  readonly resistanceOhm: number
  readonly capacitanceF: number
  readonly supplyV: number
  readonly leakageOhm: number | null
  readonly biasA: number
}

/** Seconds until the node reaches two thirds of the supply, or `null` when it has not within `limitS`. */
export function transientDurationS(node: RcNode, limitS: number): number | null {
  const slope = (v: number): number =>
    ((node.supplyV - v) / node.resistanceOhm - (node.leakageOhm === null ? 0 : v / node.leakageOhm) - node.biasA) / node.capacitanceF
  const thresholdV = (2 / 3) * node.supplyV
  const stepS = (node.resistanceOhm * node.capacitanceF) / 20_000
  let v = 0
  for (let t = 0; t < limitS; t += stepS) {
    const k1 = slope(v)
    const k2 = slope(v + (stepS / 2) * k1)
    const k3 = slope(v + (stepS / 2) * k2)
    const k4 = slope(v + stepS * k3)
    const next = v + (stepS / 6) * (k1 + 2 * k2 + 2 * k3 + k4)
    if (next >= thresholdV) return t + (stepS * (thresholdV - v)) / (next - v)
    v = next
  }
  return null
}

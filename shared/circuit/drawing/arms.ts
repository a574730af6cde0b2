import { forEachRunPoint } from '../grammar/check-circuit'
import type { Circuit, GridPoint } from '../part'
import { pointsOf } from '../points'

/** Directions in which something leaves a grid point, as bits. */
const ARM = { left: 1, right: 2, up: 4, down: 8 } as const

const armTowards = (from: GridPoint, to: GridPoint) =>
  (to.x < from.x ? ARM.left : to.x > from.x ? ARM.right : 0) | (to.y < from.y ? ARM.up : to.y > from.y ? ARM.down : 0)

/** What leaves each grid point of a circuit in which direction: wires, leads and symbols; wires that overlap count once. */
export class Arms {
  private readonly at = new Map<number, number>()
  private readonly barsBelow = new Map<GridPoint, boolean>()

  constructor(private readonly circuit: Circuit) {
    for (const part of circuit.parts) {
      if (part.kind === 'opamp') {
        for (const input of [part.minus, part.plus]) this.add(input, armTowards(input, { x: part.out.x, y: input.y }))
        this.add(part.out, armTowards(part.out, { x: part.minus.x, y: part.out.y }))
        for (const pin of part.supply ?? []) this.add(pin, armTowards(pin, { x: pin.x, y: part.out.y }))
      } else {
        const [a, b] = part.pins
        this.add(a, armTowards(a, b))
        this.add(b, armTowards(b, a))
      }
    }
    for (const wire of circuit.wires)
      for (let k = 1; k < wire.points.length; k++) {
        const [a, b] = [wire.points[k - 1]!, wire.points[k]!]
        forEachRunPoint([a, b], (point) => this.add(point, armTowards(point, a) | armTowards(point, b)))
      }
    for (const one of [...circuit.grounds, ...circuit.references]) this.add(one.at, ARM.down)
    for (const { at } of circuit.supplies) this.barsBelow.set(at, (this.of(at) & (ARM.up | ARM.down)) === ARM.up)
    for (const [at, below] of this.barsBelow) this.add(at, below ? ARM.down : ARM.up)
  }

  private add({ x, y }: GridPoint, arms: number) {
    const key = x * 1000 + y
    this.at.set(key, (this.at.get(key) ?? 0) | arms)
  }

  private of({ x, y }: GridPoint) {
    return this.at.get(x * 1000 + y) ?? 0
  }

  /** A supply's bar stands away from what it feeds: below (1) when that lies above, else above (−1). */
  supplyDirection(at: GridPoint): 1 | -1 {
    return this.barsBelow.get(at) ? 1 : -1
  }

  /** Points where three or more arms are joined; a mere crossing of wires is none, nor is a port, which has its circle. */
  dots(): GridPoint[] {
    const seen = new Set(
      this.circuit.ports
        .flatMap((port) => [port.plus, ...(port.minus ? [port.minus] : [])])
        .map((p) => `${p.x},${p.y}`),
    )
    return pointsOf({ ...this.circuit, names: [] }).flatMap(({ point }) => {
      const key = `${point.x},${point.y}`
      if (seen.has(key)) return []
      seen.add(key)
      const arms = this.of(point)
      const count = [ARM.left, ARM.right, ARM.up, ARM.down].filter((arm) => arms & arm).length
      return count >= 3 ? [point] : []
    })
  }
}

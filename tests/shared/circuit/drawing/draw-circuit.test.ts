import { JSDOM } from 'jsdom'
import { describe, expect, it } from 'vitest'
import type { Box, Drawing, DrawingStandard, Shape } from '#shared/circuit/drawing/drawing'
import { sharedArea, STEP } from '#shared/circuit/drawing/drawing'
import { drawCircuit } from '#shared/circuit/drawing/draw-circuit'
import { drawingSvg } from '#shared/circuit/drawing/drawing-svg'
import { nameParts, nameWidth, roomOf } from '#shared/circuit/drawing/text'
import { readCircuit } from '#shared/circuit/grammar/read-circuit'
import { valueOf } from '#shared/problems'
import { CIRCUIT_TEXTS, CIRCUIT_TEXT_NAMES } from '../../../support/circuit-texts'

const draw = (text: string, standard?: DrawingStandard) => drawCircuit(valueOf(readCircuit(text)), { standard })
const pointsOf = (shape: Shape) => (shape.form === 'polyline' ? shape.points : [])
const ofStyle = (drawing: Drawing, style: Shape['style']) => drawing.shapes.filter((shape) => shape.style === style)
const dots = (drawing: Drawing) =>
  ofStyle(drawing, 'dot').map((shape) => (shape.form === 'circle' ? `${shape.x / STEP},${shape.y / STEP}` : ''))
/** Room of each label: designators and names as set, values as wide as a usual one, 44.2 kΩ. */
const labelRooms = (drawing: Drawing): (Box & { of: string })[] => [
  ...drawing.texts.map((text) => ({
    of: `${text.role} ${text.text}${text.sub}`,
    ...roomOf(text, { width: nameWidth(text), height: 15 }),
  })),
  ...drawing.values.map((slot) => ({ of: `value ${slot.ref}`, ...roomOf(slot, { width: 56, height: 13 }) })),
]
const strokes = (drawing: Drawing): Box[] =>
  drawing.shapes.flatMap((shape) =>
    pointsOf(shape)
      .slice(1)
      .map(([x, y], k) => {
        const [fromX, fromY] = pointsOf(shape)[k]!
        return {
          left: Math.min(x, fromX),
          right: Math.max(x, fromX),
          top: Math.min(y, fromY),
          bottom: Math.max(y, fromY),
        }
      })
      // A slope's box says nothing about where the slope runs.
      .filter((box) => box.left === box.right || box.top === box.bottom)
      .map((box) => ({ left: box.left - 1, right: box.right + 1, top: box.top - 1, bottom: box.bottom + 1 })),
  )

describe.each(CIRCUIT_TEXT_NAMES)('%s', (name) => {
  const drawing = draw(CIRCUIT_TEXTS[name].text)

  it('fits the bench, 590 by 250', () => {
    expect(drawing.viewBox.width).toBeLessThanOrEqual(590)
    expect(drawing.viewBox.height).toBeLessThanOrEqual(250)
  })

  it('keeps every label clear of the others, of wires and of bodies', () => {
    const rooms = labelRooms(drawing)
    const clashes = rooms.flatMap((room, k) => [
      ...rooms
        .slice(k + 1)
        .filter((other) => sharedArea(room, other) > 0)
        .map((other) => `${room.of} × ${other.of}`),
      ...strokes(drawing)
        .filter((stroke) => sharedArea(room, stroke) > 0)
        .map((stroke) => `${room.of} × ${JSON.stringify(stroke)}`),
    ])
    expect(clashes).toEqual([])
  })

  it('holds everything within its frame', () => {
    const { x, y, width, height } = drawing.viewBox
    for (const box of [...labelRooms(drawing), ...drawing.areas, ...strokes(drawing)]) {
      expect(box.left).toBeGreaterThanOrEqual(x)
      expect(box.right).toBeLessThanOrEqual(x + width)
      expect(box.top).toBeGreaterThanOrEqual(y)
      expect(box.bottom).toBeLessThanOrEqual(y + height)
    }
  })

  it('has a value slot for each passive part and a model slot for each op-amp', () => {
    const { parts } = valueOf(readCircuit(CIRCUIT_TEXTS[name].text))
    expect(drawing.values.map((slot) => slot.ref)).toEqual(parts.filter((p) => p.kind !== 'opamp').map((p) => p.ref))
    expect(drawing.models.map((slot) => slot.ref)).toEqual(['U1'])
    expect(new Map(drawing.areas.map((area) => [area.ref, area.line]))).toEqual(
      new Map(parts.map((p) => [p.ref, p.span.line])),
    )
  })
})

describe('nodes', () => {
  it('have a dot where three or more meet', () => {
    expect(dots(draw(CIRCUIT_TEXTS['lp1-inv'].text)).sort()).toEqual(['16,3', '16,6', '8,3', '8,5'])
    expect(dots(draw(CIRCUIT_TEXTS['lp2-sku'].text)).sort()).toEqual(['11,4', '18,5', '6,4'])
  })

  const cross = [
    'input in 1,3',
    'R R1 1,3 4,3',
    'wire 4,3 9,3',
    'output out 9,3',
    'C C1 6,1 9,1',
    'wire 6,1 6,5',
    'L L1 6,5 6,8',
    'ground 6,8',
    'wire 9,1 10,1',
    'ground 10,1',
  ]
  it('have none where wires only cross, nor where wires lie on each other', () => {
    expect(dots(draw(cross.join('\n')))).toEqual([])
    expect(dots(draw([...cross, 'wire 5,3 9,3'].join('\n')))).toEqual([])
    expect(dots(draw([...cross, 'wire 6,3 6,5'].join('\n')))).toEqual(['6,3'])
  })

  it('leave the circle of a port open', () => {
    const drawing = draw('input in 1,3\nR R1 1,3 4,3\nwire 4,3 8,3\noutput out 6,3\nC C1 8,3 8,6\nground 8,6')
    const centres = ofStyle(drawing, 'port').map((shape) =>
      shape.form === 'circle' ? [shape.x, shape.y, shape.radius] : [],
    )
    expect(centres).toHaveLength(2)
    for (const [x, y, radius] of centres as [number, number, number][])
      for (const shape of ofStyle(drawing, 'wire'))
        pointsOf(shape)
          .slice(1)
          .forEach(([toX, toY], k) => {
            const [fromX, fromY] = pointsOf(shape)[k]!
            const [dx, dy] = [
              Math.max(Math.min(fromX, toX) - x, 0, x - Math.max(fromX, toX)),
              Math.max(Math.min(fromY, toY) - y, 0, y - Math.max(fromY, toY)),
            ]
            expect(Math.hypot(dx, dy)).toBeGreaterThanOrEqual(radius - 1e-9)
          })
  })
})

describe('symbols', () => {
  const text = 'input in 1,3\nR R1 1,3 4,3\nL L1 4,3 4,6\nground 4,6\noutput out 4,3'
  // Source: IEC 60617 (rectangle), IEEE 315 (zigzag).
  it('draws a resistor as a rectangle or as a zigzag', () => {
    const body = (standard: DrawingStandard) =>
      ofStyle(draw(text, standard), 'body').find((shape) => 'ref' in shape && shape.ref === 'R1')
    expect(body('iec')).toMatchObject({ form: 'polyline', closed: true, points: { length: 4 } })
    expect(body('ieee')).toMatchObject({ form: 'polyline', points: { length: 8 } })
    expect(draw(text)).toEqual(draw(text, 'iec'))
  })

  it('draws an inductor as four half circles', () => {
    const body = ofStyle(draw(text), 'body').find((shape) => shape.form === 'path')
    expect(body?.form === 'path' && body.d.match(/A /g)).toHaveLength(4)
  })

  it('points an op-amp from its inputs to its output, with the signs at their inputs', () => {
    const left = draw('input in 9,2\nwire 9,2 8,2\nopamp U1 - 8,4 + 8,2 out 4,3\nwire 8,4 8,6 4,6 4,3\noutput out 4,3')
    const triangle = pointsOf(ofStyle(left, 'body').find((shape) => 'ref' in shape && shape.ref === 'U1')!)
    expect(triangle[1]![0]).toBeLessThan(triangle[0]![0])
    const sign = (text: string) => left.texts.find((one) => one.role === 'sign' && one.text === text)!
    expect(sign('−').y).toBeGreaterThan(sign('+').y)
  })

  it('puts the bar of a supply away from what it feeds', () => {
    const powered = draw(
      `${CIRCUIT_TEXTS['lp1-inv'].text.replace('out 15,6', 'out 15,6 supply 13,4 13,8')}grid 20 x 12\nsupply V+ 13,4\nsupply V- 13,8`,
    )
    const name = (text: string) => powered.texts.find((one) => one.text === text)!
    expect(name('V+').y).toBeLessThan(4 * STEP)
    expect(name('V−').y).toBeGreaterThan(8 * STEP)
  })
})

describe('labels', () => {
  it.each([
    ['Ri', 'R', 'i'],
    ['R1', 'R', '1'],
    ['C12a', 'C', '12a'],
    ['U1', 'U1', ''],
    ['Vref', 'V', 'ref'],
    ['V+', 'V+', ''],
    ['V-', 'V−', ''],
    ['m', 'm', ''],
  ])('sets %s as %s with subscript %s', (name, text, sub) => {
    expect(nameParts(name)).toEqual({ text, sub })
  })

  it('stand on the side that the editor chose', () => {
    const text = (side: string) => `input in 1,3\nR R1 1,3 4,3 label ${side}\nC C1 4,3 4,6\nground 4,6\noutput out 4,3`
    const [above, below] = [draw(text('above')), draw(text('below'))]
    expect(above.values[0]!.y).toBeLessThan(3 * STEP)
    expect(below.values[0]!.y).toBeGreaterThan(3 * STEP)
    expect(below.texts.find((one) => one.ref === 'R1')!.y).toBeGreaterThan(3 * STEP)
  })

  it('name the sides of a pair and the nodes named in the text', () => {
    const drawing = draw(
      'input in + 1,3 - 1,6\nR R1 1,3 4,3\nR R2 4,3 4,6\nwire 1,6 4,6 4,7\nground 4,7\nname m 4,3\noutput out 4,3',
    )
    expect(drawing.texts.filter((one) => one.role === 'port').map((one) => one.text)).toEqual(['in+', 'in−', 'out'])
    expect(drawing.texts.filter((one) => one.role === 'node').map((one) => one.text)).toEqual(['m'])
  })

  it('are placed for 400 parts within two seconds', () => {
    const lines = Array.from({ length: 400 }, (_, k) => {
      const [x, y] = [3 * (k % 20), 3 * Math.floor(k / 20)]
      return k % 2 ? `R R${k} ${x},${y} ${x + 3},${y}` : `C C${k} ${x},${y} ${x},${y + 3}\nwire ${x},${y} ${x + 3},${y}`
    })
    const circuit = readCircuit(
      ['input in 0,0', 'output out 3,0', ...lines, 'ground 0,3', 'wire 0,60 60,60 60,0'].join('\n'),
    )
    if (!circuit.ok) throw new Error(circuit.problems.map((one) => `${one.line}: ${one.detail}`).join('\n'))
    const before = performance.now()
    drawCircuit(circuit.value)
    expect(performance.now() - before).toBeLessThan(2000)
  })
})

describe('drawingSvg', () => {
  const parse = (svg: string) => new JSDOM(svg, { contentType: 'image/svg+xml' }).window.document.documentElement
  const drawing = draw(CIRCUIT_TEXTS['lp1-inv'].text)

  it('is an image with a title, with designators, values and the chosen op-amp as text', () => {
    const svg = parse(
      drawingSvg(drawing, { Ri: '22.1 kΩ', Rf: '44.2 kΩ', U1: 'HA-04' }, { title: 'Inverting low-pass' }),
    )
    expect(svg.getAttribute('role')).toBe('img')
    expect(svg.querySelector('title')!.textContent).toBe('Inverting low-pass')
    const texts = [...svg.querySelectorAll('text')].map((one) => one.textContent)
    expect(texts).toEqual(
      expect.arrayContaining(['Ri', 'Rf', 'Cf', 'U1', 'in', 'out', '22.1 kΩ', '44.2 kΩ', 'U1 HA-04']),
    )
    expect(texts).not.toContain('')
  })

  it('carries hostile text as text', () => {
    const hostile = `"><script>alert(1)</script><a href='javascript:x' onload=x>&\u0000\ud800`
    const text = drawingSvg(drawing, { Ri: hostile, U1: hostile }, { title: hostile })
    const svg = parse(text)
    expect(
      [...svg.querySelectorAll('*')]
        .map((one) => one.localName)
        .filter(
          (name) => !['svg', 'title', 'g', 'text', 'tspan', 'polyline', 'polygon', 'circle', 'path'].includes(name),
        ),
    ).toEqual([])
    const attributes = [svg, ...svg.querySelectorAll('*')].flatMap((one) =>
      [...one.attributes].map((attribute) => attribute.name),
    )
    expect(attributes.filter((name) => /^on|href|style/i.test(name))).toEqual([])
    expect(svg.querySelector('title')!.textContent).toContain('<script>alert(1)</script>')
  })

  it('takes no value from the prototype of what it is given', () => {
    const named = draw('input in 1,3\nR R1 1,3 4,3\nC C1 4,3 4,6\nground 4,6\noutput out 4,3')
    named.values[0]!.ref = 'constructor'
    expect(drawingSvg(named, {}, { title: 't' })).not.toContain('function')
  })
})

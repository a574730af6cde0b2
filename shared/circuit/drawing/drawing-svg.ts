import type { Drawing, DrawingText, Shape, ValueSlot } from './drawing'
import { TEXT_SIZE } from './text'

const escapeXml = (text: string) =>
  text
    .replace(/[&<>"']/g, (c) => ({ '&': '&amp;', '<': '&lt;', '>': '&gt;', '"': '&quot;', "'": '&apos;' })[c]!)
    .replace(/[\p{Cc}\p{Cs}\uFFFE\uFFFF]/gu, '')

/**
 * The drawing as a still SVG document, for print and for links: every text escaped, nothing in it that acts.
 * @param valueTexts shown values by designator; of an op-amp, the name of the one chosen
 */
export function drawingSvg(
  drawing: Drawing,
  valueTexts: Readonly<Record<string, string>>,
  options: { title: string },
): string {
  const { x, y, width, height } = drawing.viewBox
  const shownFor = ({ ref }: ValueSlot) => (Object.hasOwn(valueTexts, ref) ? valueTexts[ref]! : '')
  const values = drawing.values.map((slot) => slotSvg(slot, shownFor(slot), 'Fira Mono, monospace'))
  const models = drawing.models.map((slot) =>
    slotSvg(slot, shownFor(slot) && `${slot.ref} ${shownFor(slot)}`, 'Lato, sans-serif'),
  )
  return [
    `<svg xmlns="http://www.w3.org/2000/svg" viewBox="${x} ${y} ${width} ${height}" width="${width}" height="${height}" role="img">`,
    `<title>${escapeXml(options.title)}</title>`,
    `<g fill="none" stroke="currentColor" stroke-width="1.8" stroke-linejoin="round">${drawing.shapes.map(shapeSvg).join('')}</g>`,
    `<g fill="currentColor" font-family="Lato, sans-serif" font-size="${TEXT_SIZE.name}">${drawing.texts.map(textSvg).join('')}${values.join('')}${models.join('')}</g>`,
    '</svg>',
  ].join('')
}

/** Points of a polyline as an attribute. */
export const pointList = (points: readonly [number, number][]) => points.map(([x, y]) => `${x},${y}`).join(' ')

function shapeSvg(shape: Shape): string {
  if (shape.form === 'circle')
    return `<circle cx="${shape.x}" cy="${shape.y}" r="${shape.radius}"${shape.style === 'dot' ? ' fill="currentColor"' : ''}/>`
  if (shape.form === 'path') return `<path d="${escapeXml(shape.d)}"/>`
  return `<${shape.closed ? 'polygon' : 'polyline'} points="${pointList(shape.points)}"/>`
}

const textSvg = (text: DrawingText) =>
  `<text x="${text.x}" y="${text.y}" text-anchor="${text.anchor}">${escapeXml(text.text)}${
    text.sub ? `<tspan dy="4" font-size="${TEXT_SIZE.sub}">${escapeXml(text.sub)}</tspan>` : ''
  }</text>`

const slotSvg = ({ x, y, anchor }: ValueSlot, text: string, family: string) =>
  text &&
  `<text x="${x}" y="${y}" text-anchor="${anchor}" font-family="${family}" font-size="${TEXT_SIZE.value}">${escapeXml(text)}</text>`

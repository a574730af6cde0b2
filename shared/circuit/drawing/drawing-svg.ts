import type { Drawing, DrawingText, Shape } from './drawing'

const escapeXml = (text: string) =>
  text
    .replace(/[&<>"']/g, (c) => ({ '&': '&amp;', '<': '&lt;', '>': '&gt;', '"': '&quot;', "'": '&apos;' })[c]!)
    .replace(/\p{Cc}/gu, '')

/**
 * The drawing as a still SVG document, for print and for links: every text escaped, nothing in it that acts.
 * @param valueTexts shown values by designator
 */
export function drawingSvg(
  drawing: Drawing,
  valueTexts: Readonly<Record<string, string>>,
  options: { title: string },
): string {
  const { x, y, width, height } = drawing.viewBox
  const values = drawing.values.map(
    (slot) =>
      `<text x="${slot.x}" y="${slot.y}" text-anchor="${slot.anchor}" font-family="Fira Mono, monospace" font-size="13">${escapeXml(valueTexts[slot.ref] ?? '')}</text>`,
  )
  return [
    `<svg xmlns="http://www.w3.org/2000/svg" viewBox="${x} ${y} ${width} ${height}" width="${width}" height="${height}" role="img">`,
    `<title>${escapeXml(options.title)}</title>`,
    `<g fill="none" stroke="currentColor" stroke-width="1.8" stroke-linejoin="round">${drawing.shapes.map(shapeSvg).join('')}</g>`,
    `<g fill="currentColor" font-family="Lato, sans-serif" font-size="15">${drawing.texts.map(textSvg).join('')}${values.join('')}</g>`,
    '</svg>',
  ].join('')
}

/** Points of a polyline as an attribute. */
export const pointList = (points: readonly [number, number][]) => points.map(([x, y]) => `${x},${y}`).join(' ')

function shapeSvg(shape: Shape): string {
  if (shape.form === 'circle')
    return `<circle cx="${shape.x}" cy="${shape.y}" r="${shape.radius}"${shape.style === 'dot' ? ' fill="currentColor"' : ' fill="#fff"'}/>`
  if (shape.form === 'path') return `<path d="${escapeXml(shape.d)}"/>`
  return `<${shape.closed ? 'polygon' : 'polyline'} points="${pointList(shape.points)}"/>`
}

const textSvg = (text: DrawingText) =>
  `<text x="${text.x}" y="${text.y}" text-anchor="${text.anchor}">${escapeXml(text.text)}${
    text.sub ? `<tspan dy="4" font-size="11">${escapeXml(text.sub)}</tspan>` : ''
  }</text>`

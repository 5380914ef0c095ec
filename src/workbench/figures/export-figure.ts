import { downloadBlob, downloadText } from '../download'

/** Properties that a drawing takes from the page's style; written into it, so that it stands alone. */
const STROKE = ['stroke-width', 'stroke-dasharray', 'stroke-linecap', 'paint-order'] as const
const TYPE = ['font-family', 'font-size', 'font-style', 'font-weight', 'text-anchor'] as const

/** Pixels of a PNG to a unit of the drawing. */
const PNG_SCALE = 2

export interface FigureText {
  readonly title: string
  readonly description: string
}

/**
 * The drawing as an SVG text of its own: light colours on white whatever the page's theme, every style written out,
 * `title` and `desc` at its head.
 */
export function writeSvg(drawing: SVGSVGElement, text: FigureText): string {
  const { width, height } = drawing.getBoundingClientRect()
  const copy = drawing.cloneNode(true) as SVGSVGElement
  // Styles are worked out where the light palette holds, out of sight.
  const stage = document.createElement('div')
  stage.dataset.theme = 'light'
  stage.className = 'plot'
  stage.style.cssText = 'position:absolute;left:-10000px;top:0'
  stage.append(copy)
  document.body.append(stage)
  try {
    for (const element of copy.querySelectorAll<SVGElement>('*')) writeStyle(element)
  } finally {
    stage.remove()
  }
  for (const ring of copy.querySelectorAll('[tabindex], [role]')) {
    ring.removeAttribute('tabindex')
    ring.removeAttribute('role')
  }
  for (const each of [...copy.attributes]) copy.removeAttribute(each.name)
  copy.setAttribute('xmlns', 'http://www.w3.org/2000/svg')
  copy.setAttribute('viewBox', `0 0 ${Math.round(width)} ${Math.round(height)}`)
  copy.setAttribute('width', String(Math.round(width)))
  copy.setAttribute('height', String(Math.round(height)))
  for (const old of copy.querySelectorAll(':scope > title, :scope > desc')) old.remove()
  const ground = svgElement('rect', { width: '100%', height: '100%', fill: '#ffffff' })
  const title = svgElement('title', {})
  title.textContent = text.title
  const description = svgElement('desc', {})
  description.textContent = text.description
  copy.prepend(title, description, ground)
  return `<?xml version="1.0" encoding="UTF-8"?>\n${new XMLSerializer().serializeToString(copy)}\n`
}

function writeStyle(element: SVGElement): void {
  const style = getComputedStyle(element)
  const isType = element.localName === 'text' || element.localName === 'tspan'
  const write = (properties: readonly string[]) => {
    for (const property of properties) {
      const value = style.getPropertyValue(property)
      if (value !== '') element.setAttribute(property, value)
    }
  }
  write(['fill', 'stroke'])
  if (style.stroke !== 'none') write(STROKE)
  if (isType) write(TYPE)
  element.removeAttribute('style')
  element.removeAttribute('class')
}

function svgElement(name: string, attributes: Readonly<Record<string, string>>): SVGElement {
  const element = document.createElementNS('http://www.w3.org/2000/svg', name)
  for (const [attribute, value] of Object.entries(attributes)) element.setAttribute(attribute, value)
  return element
}

/** Saves the drawing as SVG. */
export function saveSvg(file: string, drawing: SVGSVGElement, text: FigureText): void {
  downloadText(`${file}.svg`, writeSvg(drawing, text), 'image/svg+xml')
}

/** Saves the drawing as PNG, two pixels to a unit. Rejects where the browser cannot draw it. */
export async function savePng(file: string, drawing: SVGSVGElement, text: FigureText): Promise<void> {
  const { width, height } = drawing.getBoundingClientRect()
  const image = new Image()
  image.src = `data:image/svg+xml;charset=utf-8,${encodeURIComponent(writeSvg(drawing, text))}`
  await image.decode()
  const canvas = document.createElement('canvas')
  canvas.width = Math.round(width) * PNG_SCALE
  canvas.height = Math.round(height) * PNG_SCALE
  const context = canvas.getContext('2d')
  if (!context) throw new Error('The browser gives no canvas to draw on.')
  context.drawImage(image, 0, 0, canvas.width, canvas.height)
  const blob = await new Promise<Blob | null>(resolve => canvas.toBlob(resolve, 'image/png'))
  if (!blob) throw new Error('The browser could not write the PNG.')
  downloadBlob(`${file}.png`, blob)
}

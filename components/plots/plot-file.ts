import { csvLine } from '@/lib/science/formats/csv'

/** The numbers of a plot, as its table and its CSV show them. */
export interface PlotTable {
  columns: readonly { name: string; numeric?: boolean }[]
  /** Text is shown as it is; numbers with the digits of `digits`, in the CSV exactly. */
  rows: readonly (readonly (string | number | null)[])[]
  digits?: number
}

const FONT = "'Atkinson Hyperlegible Next', 'Atkinson Hyperlegible', system-ui, sans-serif"
const TITLE_HEIGHT = 34
const MARGIN = 12
const NAMESPACE = 'http://www.w3.org/2000/svg'
/** For the page only: a file is looked at, not walked through. */
const PAGE_ATTRIBUTES = [
  'class',
  'style',
  'tabindex',
  'role',
  'data-mark',
  'aria-label',
  'aria-labelledby',
  'aria-hidden',
]

/**
 * The drawing as a file that stands by itself: colours of the theme it was drawn in instead of variables, fonts by name, the
 * title above it, and the page's colour behind it.
 * @param valueOf the value of a CSS variable, such as `--text`.
 */
export function svgFile(svg: SVGSVGElement, title: string, valueOf: (variable: string) => string): string {
  const copy = svg.cloneNode(true) as SVGSVGElement
  const [, , width, height] = (copy.getAttribute('viewBox') ?? '0 0 640 320').split(' ').map(Number)
  for (const hidden of copy.querySelectorAll('[data-page-only]')) hidden.remove()
  for (const element of [copy, ...copy.querySelectorAll('*')]) {
    for (const name of PAGE_ATTRIBUTES) element.removeAttribute(name)
    for (const { name, value } of [...element.attributes]) {
      if (value.includes('var(')) element.setAttribute(name, resolve(value, valueOf))
    }
  }
  const whole = { x: -MARGIN, y: -TITLE_HEIGHT, width: width + 2 * MARGIN, height: height + TITLE_HEIGHT }
  copy.setAttribute('viewBox', Object.values(whole).join(' '))
  copy.setAttribute('width', String(whole.width))
  copy.setAttribute('height', String(whole.height))
  copy.setAttribute('font-family', FONT)
  const drawn = copy.querySelector('desc')
  const back = element('rect', { ...whole, fill: valueOf('--page') })
  const head = element('text', { x: 0, y: -12, fill: valueOf('--text'), 'font-size': 15, 'font-weight': 600 })
  head.textContent = title
  for (const part of [head, back]) {
    if (drawn) drawn.after(part)
    else copy.prepend(part)
  }
  return `<?xml version="1.0" encoding="UTF-8"?>\n${new XMLSerializer().serializeToString(copy)}\n`
}

function element(name: string, attributes: Record<string, string | number>): SVGElement {
  const made = document.createElementNS(NAMESPACE, name)
  for (const [key, value] of Object.entries(attributes)) made.setAttribute(key, String(value))
  return made
}

function resolve(value: string, valueOf: (variable: string) => string): string {
  return value.replace(/var\((--[\w-]+)\)/g, (whole, variable: string) => valueOf(variable).trim() || whole)
}

/** The table as CSV after RFC 4180, numbers with all their digits. */
export function csvFile({ columns, rows }: PlotTable): string {
  return [columns.map(({ name }) => name), ...rows].map((row) => csvLine([...row])).join('')
}

/** Hands a text to the browser as a file; whatever a file name should not hold becomes a hyphen. */
export function saveFile(name: string, type: string, text: string): void {
  const url = URL.createObjectURL(new Blob([text], { type }))
  const link = document.createElement('a')
  link.href = url
  link.download = name.replace(/[^\p{L}\p{N}._-]+/gu, '-')
  link.click()
  setTimeout(() => URL.revokeObjectURL(url), 10_000)
}

import { render, screen, within } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { afterEach, describe, expect, it, vi } from 'vitest'
import { BarPlot } from './bar-plot'
import { IntervalPlot } from './interval-plot'
import { MatrixPlot } from './matrix-plot'
import { csvFile, svgFile } from './plot-file'
import { XyPlot } from './xy-plot'

const table = {
  columns: [{ name: 'Grader' }, { name: 'Share', numeric: true }],
  rows: [
    ['curlew', 0.8125],
    ['knot, the second', -0.5],
    ['plover', null],
  ],
}

const frame = { title: 'Shares', description: 'Two shares.', fileName: 'shares', table }

function intervals() {
  return (
    <IntervalPlot
      {...frame}
      domain={[0, 1]}
      axis="Share of candidates"
      series={[
        { form: 'disc', label: 'Lenses' },
        { form: 'square', label: 'Others' },
      ]}
      rows={[
        {
          label: 'curlew',
          values: [
            { value: 0.8, low: 0.7, high: 0.9, reading: 'curlew, lenses: 80 %' },
            { value: 0.6, low: null, high: null, reading: 'curlew, others: 60 %' },
          ],
        },
        { label: 'knot', values: [null, { value: 0.4, low: 0.3, high: 0.5, reading: 'knot, others: 40 %' }] },
      ]}
    />
  )
}

/** What the browser was handed as a file. */
function catchFiles() {
  const files: Blob[] = []
  const names: string[] = []
  vi.spyOn(URL, 'createObjectURL').mockImplementation((blob) => {
    files.push(blob as Blob)
    return 'blob:here'
  })
  vi.spyOn(HTMLAnchorElement.prototype, 'click').mockImplementation(function (this: HTMLAnchorElement) {
    names.push(this.download)
  })
  return { files, names }
}

URL.createObjectURL ??= () => ''
URL.revokeObjectURL ??= () => {}
afterEach(() => vi.restoreAllMocks())

describe('a plot', () => {
  it('says what it is: title, description, axis with unit, legend, and each point in words', () => {
    render(intervals())
    const plot = screen.getByRole('group', { name: 'Shares Two shares.' })
    expect(within(plot).getByText('Share of candidates')).toBeInTheDocument()
    expect(within(plot).getByText('Lenses')).toBeInTheDocument()
    expect(
      within(plot)
        .getAllByRole('img')
        .map((mark) => mark.getAttribute('aria-label')),
    ).toEqual(['curlew, lenses: 80 %', 'curlew, others: 60 %', 'knot, others: 40 %'])
  })

  it('is one stop of the Tab key; arrows go from point to point, Home and End to the ends, and the words follow', async () => {
    const user = userEvent.setup()
    render(intervals())
    const [first, second, third] = screen.getAllByRole('img')
    expect([first, second, third].map((mark) => mark.getAttribute('tabindex'))).toEqual(['0', '-1', '-1'])
    first.focus()
    await user.keyboard('{ArrowRight}')
    expect(second).toHaveFocus()
    expect(screen.getByText('curlew, others: 60 %')).toBeInTheDocument()
    await user.keyboard('{End}')
    expect(third).toHaveFocus()
    await user.keyboard('{ArrowDown}')
    expect(third).toHaveFocus()
    await user.keyboard('{Home}')
    expect(first).toHaveFocus()
  })

  it('shows the same numbers as a table, and comes back', async () => {
    const user = userEvent.setup()
    render(intervals())
    await user.click(screen.getByRole('button', { name: 'Show as table: Shares' }))
    const shown = screen.getByRole('table', { name: 'Shares' })
    expect(
      within(shown)
        .getAllByRole('columnheader')
        .map((head) => head.textContent),
    ).toEqual(['Grader', 'Share'])
    expect(
      within(shown)
        .getAllByRole('row')
        .map((row) => row.textContent),
    ).toEqual(['GraderShare', 'curlew0.81', 'knot, the second−0.50', 'plover–'])
    expect(screen.queryByRole('group', { name: /Shares/ })).not.toBeInTheDocument()
    await user.click(screen.getByRole('button', { name: 'Show as plot: Shares' }))
    expect(screen.getByRole('group', { name: /Shares/ })).toBeInTheDocument()
  })

  it('hands out its numbers as CSV with all digits, quoted where needed', async () => {
    const { files, names } = catchFiles()
    const user = userEvent.setup()
    render(intervals())
    await user.click(screen.getByRole('button', { name: 'Save the numbers as CSV: Shares' }))
    expect(names).toEqual(['shares.csv'])
    expect(await files[0].text()).toBe('Grader,Share\r\ncurlew,0.8125\r\n"knot, the second",-0.5\r\nplover,\r\n')
    expect(csvFile(table)).toBe(await files[0].text())
  })

  it('hands out an SVG that stands by itself: title, axis, colours instead of variables, nothing of the page', async () => {
    const { files, names } = catchFiles()
    const user = userEvent.setup()
    render(intervals())
    await user.click(screen.getByRole('button', { name: 'Save the plot as SVG: Shares' }))
    expect(names).toEqual(['shares.svg'])
    expect(files[0].type).toBe('image/svg+xml')

    const svg = screen.getByRole('group', { name: /Shares/ }) as unknown as SVGSVGElement
    const colours: Record<string, string> = { '--text': '#ece9e4', '--page': '#121212' }
    const text = svgFile(svg, 'Shares of "two" & more', (variable) => colours[variable] ?? '#abcdef')
    const parsed = new DOMParser().parseFromString(text, 'image/svg+xml')
    expect(parsed.querySelector('parsererror')).toBeNull()
    const root = parsed.documentElement
    expect(root.namespaceURI).toBe('http://www.w3.org/2000/svg')
    expect(root.getAttribute('font-family')).toContain('Atkinson Hyperlegible')
    expect(text).not.toMatch(/var\(|class=|tabindex|aria-|data-mark|role=/)
    const words = [...parsed.querySelectorAll('text')].map((one) => one.textContent)
    expect(words).toContain('Shares of "two" & more')
    expect(words).toContain('Share of candidates')
    const [back, head] = [parsed.querySelector('rect'), parsed.querySelector('text')]
    expect(back?.getAttribute('fill')).toBe('#121212')
    expect(head?.getAttribute('fill')).toBe('#ece9e4')
    expect(root.querySelector('title')?.textContent).toBe('Shares')
    // The page's own drawing is as it was.
    expect(svg.querySelector('[data-mark]')).not.toBeNull()
    expect(svg.innerHTML).toContain('var(--')
  })
})

describe('each kind of plot', () => {
  it('draws bars that end at their counts and leave out the empty part', () => {
    render(
      <BarPlot
        {...frame}
        xLabel="Day (UTC)"
        yLabel="Looks a day"
        parts={[
          { label: 'A', fill: 'a' },
          { label: 'N', fill: 'n' },
        ]}
        bars={[
          { label: '1 Mar', values: [100, 300], reading: '1 Mar: 400' },
          { label: '2 Mar', values: [0, 200], reading: '2 Mar: 200' },
        ]}
      />,
    )
    const heights = (name: string) =>
      [...screen.getByRole('img', { name }).querySelectorAll('rect[stroke]')].map((bar) =>
        Number(bar.getAttribute('height')),
      )
    const [a, n] = heights('1 Mar: 400')
    expect(n).toBeCloseTo(3 * a, 9)
    expect(heights('2 Mar: 200')).toEqual([expect.closeTo(2 * a, 9)])
    expect(screen.getByText('Looks a day')).toBeInTheDocument()
  })

  it('draws an axis of counts without fractions', () => {
    const bars = [{ label: '1 Mar', values: [1], reading: '1 Mar: 1' }]
    render(<BarPlot {...frame} xLabel="Day" yLabel="Looks" parts={[{ label: 'A', fill: 'a' }]} bars={bars} />)
    expect(screen.getByText('0')).toBeInTheDocument()
    expect(screen.getByText('1')).toBeInTheDocument()
    expect(screen.queryByText(/^0\.\d/)).toBeNull()
  })

  it('draws a matrix with the number in each cell and hatches those that rest on little', () => {
    render(
      <MatrixPlot
        {...frame}
        labels={['curlew', 'knot']}
        corner={['Below: kappa']}
        cells={[
          { row: 0, column: 1, value: null, text: '12', faint: true, reading: 'few in common' },
          { row: 1, column: 0, value: 0.5, text: '0.50', faint: false, reading: 'kappa 0.50' },
        ]}
      />,
    )
    const faint = screen.getByRole('img', { name: 'few in common' })
    expect(faint).toHaveTextContent('12')
    expect(faint.querySelector('[fill="url(#plot-faint)"]')).not.toBeNull()
    expect(screen.getByRole('img', { name: 'kappa 0.50' }).querySelector('[fill="url(#plot-faint)"]')).toBeNull()
  })

  it('draws points over two axes with their intervals, and tells two series apart by form and dash', () => {
    const point = (x: number, reading: string) => ({ x, y: 0.5, low: 0.4, high: 0.6, reading })
    const { container } = render(
      <XyPlot
        {...frame}
        xDomain={[0, 10]}
        yDomain={[0, 1]}
        xLabel="Own grades, in order"
        yLabel="Share"
        series={[
          { form: 'disc', label: 'Lenses', lined: true, points: [point(2, 'a'), point(8, 'b')] },
          { form: 'square', label: 'Others', lined: true, points: [point(2, 'c'), point(8, 'd')] },
        ]}
      />,
    )
    expect(screen.getAllByRole('img')).toHaveLength(4)
    expect(screen.getByRole('img', { name: 'a' }).querySelectorAll('circle')).toHaveLength(2)
    expect(screen.getByRole('img', { name: 'c' }).querySelectorAll('rect')).toHaveLength(1)
    expect(container.querySelectorAll('path[stroke-dasharray="5 3"]').length).toBeGreaterThan(0)
    expect(screen.getByText('Own grades, in order')).toBeInTheDocument()
  })
})

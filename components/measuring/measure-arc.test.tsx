import { act, fireEvent, screen, waitFor } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { describe, expect, it } from 'vitest'
import { deskRoom, drag, pointNames, press, stage } from './_desk-room'

const start = () => userEvent.click(screen.getByText('Measure an arc'))
const radius = () => screen.getAllByText('Einstein radius')[0].nextElementSibling?.textContent

/** Four points of a circle of 1.5 arcsec about the middle. */
function circle() {
  press(1.5, 0)
  press(0, 1.5)
  press(-1.5, 0)
  press(0, -1.5)
}

describe('points by mouse', () => {
  it('give a circle with its error at once, where the picture lies on the sky', async () => {
    deskRoom()
    await start()
    circle()
    expect(pointNames()).toEqual([
      'Point 1: 1.50″ east, 0.00″ north',
      'Point 2: 0.00″ east, 1.50″ north',
      'Point 3: 1.50″ west, 0.00″ north',
      'Point 4: 0.00″ east, 1.50″ south',
    ])
    // Half a pixel of 0.2 arcsec over the root of 4 points: N. Chernov (2010).
    expect(radius()).toBe('1.500 ± 0.050″')
    expect(screen.getByText('±: 1 σ, each press taken to be good to half a pixel, 0.100″.')).toBeInTheDocument()
  })

  it('that measure a radius to less than half of it are kept only once that is confirmed', async () => {
    const { save } = deskRoom()
    await start()
    press(1.5, 0)
    press(1.45, 0.38)
    press(1.3, 0.75)
    const button = screen.getByText<HTMLButtonElement>('Save')
    expect(screen.getByLabelText(/error of the radius is \d+ % of it.*Keep it all the same/)).not.toBeChecked()
    expect(button).toBeDisabled()
    fireEvent.click(screen.getByLabelText(/Keep it all the same/))
    await userEvent.click(button)
    expect(save).toHaveBeenCalledTimes(1)
  })

  it('of a picture that is turned and mirrored are the same places on the sky', async () => {
    deskRoom({}, { northAngleDeg: 90, eastLeft: false })
    await start()
    // North to the left of the picture; mirrored, so that east is clockwise of it: up.
    press(1.5, 0)
    expect(pointNames()).toEqual(['Point 1: 0.00″ east, 1.50″ north'])
    press(0, 1)
    expect(pointNames()[1]).toBe('Point 2: 1.00″ east, 0.00″ north')
  })

  it('are moved by a drag, taken away, and undone act by act', async () => {
    deskRoom()
    await start()
    circle()
    drag([1.5, 0], [2, 0.5])
    expect(pointNames()[0]).toBe('Point 1: 2.00″ east, 0.50″ north')
    await userEvent.click(screen.getByRole('button', { name: 'Take point 1 away' }))
    expect(pointNames()).toHaveLength(3)
    await userEvent.click(screen.getByText('Undo'))
    expect(pointNames()).toHaveLength(4)
    await userEvent.click(screen.getByText('Undo'))
    expect(pointNames()[0]).toBe('Point 1: 1.50″ east, 0.00″ north')
    await userEvent.click(screen.getByRole('button', { name: 'Clear' }))
    expect(pointNames()).toEqual([])
  })

  it('follow the field of view and the room around it', async () => {
    const { light } = deskRoom()
    await start()
    act(() => light.zoom.by(2))
    press(2, 0)
    await userEvent.click(screen.getByLabelText('Room around it'))
    act(() => light.zoom.reset())
    press(2, 0)
    expect(pointNames()).toEqual(['Point 1: 1.00″ east, 0.00″ north', 'Point 2: 4.00″ east, 0.00″ north'])
  })
})

describe('points by keyboard', () => {
  it('are set where the cross stands, moved by arrows once they have the focus, and deleted', async () => {
    const user = userEvent.setup()
    deskRoom()
    await start()
    expect(stage()).toHaveFocus()
    // Half a pixel a press, five with Shift: 0.1 and 1 arcsec.
    await user.keyboard('{Shift>}{ArrowLeft}{/Shift}{ArrowLeft}{ArrowUp}{Enter}')
    expect(pointNames()).toEqual(['Point 1: 1.10″ east, 0.10″ north'])
    await user.keyboard('{Shift>}{ArrowDown}{/Shift}{Enter}')
    await user.tab()
    expect(screen.getByRole('button', { name: /^Point 1/ })).toHaveFocus()
    await user.keyboard('{ArrowRight}')
    expect(pointNames()[0]).toBe('Point 1: 1.00″ east, 0.10″ north')
    await user.keyboard('{Delete}')
    expect(pointNames()).toEqual(['Point 1: 1.10″ east, 0.90″ south'])
    await user.keyboard('{Control>}z{/Control}')
    expect(pointNames()).toHaveLength(2)
    await user.keyboard('{Escape}')
    expect(screen.queryByRole('application')).toBeNull()
  })
})

describe('what cannot be measured', () => {
  it('says in a sentence what is lacking, and nothing can be saved', async () => {
    deskRoom()
    await start()
    press(1, 0)
    press(0, 0)
    press(-1, 0)
    expect(screen.getByText(/lie on a straight line/)).toBeInTheDocument()
    expect(screen.getByText('Save')).toBeDisabled()
    await userEvent.click(screen.getByLabelText('Ellipse'))
    expect(screen.getByText(/An ellipse needs at least 5 different points and there are 3/)).toBeInTheDocument()
  })

  it('is a view without a pixel scale', async () => {
    deskRoom({}, { pixelScaleArcsec: null })
    await start()
    expect(screen.getByText(/The pixel scale of this view is not known/)).toBeInTheDocument()
    expect(screen.queryByRole('button', { name: 'Save' })).toBeNull()
  })

  it('is said to be taken for north up where its direction is not known', async () => {
    deskRoom({}, { northAngleDeg: null })
    await start()
    expect(screen.getByText(/up is taken for north/)).toBeInTheDocument()
  })
})

describe('redshifts', () => {
  const type = (label: string, value: string) => fireEvent.change(screen.getByLabelText(label), { target: { value } })
  const choose = async (which: 'lens' | 'source', name: string) => {
    const group = screen.getByRole('group', { name: `Redshift of the ${which}` })
    await userEvent.click(Array.from(group.querySelectorAll('label')).find((label) => label.textContent === name)!)
  }

  it('give dispersion and mass: 1.15 arcsec at 0.3 before 1.0 is 250 km/s', async () => {
    deskRoom({ lensRedshift: 0.3, sourceRedshift: 1 })
    await start()
    for (const [east, north] of [
      [1, 0],
      [0, 1],
      [-1, 0],
      [0, -1],
    ])
      press(1.1508576 * east, 1.1508576 * north)
    // fixtures/lensing/lensing.json, sis_einstein_radius_and_mass, second row.
    expect(screen.getByText(/^250 km\/s/)).toBeInTheDocument()
    expect(screen.getByText(/^2\.34 × 10¹¹ M☉/)).toBeInTheDocument()
    expect(screen.getByText(/^2830 M☉\/pc²/)).toBeInTheDocument()
  })

  it('that are assumed are marked so', async () => {
    deskRoom()
    await start()
    circle()
    await choose('lens', 'Assumed range')
    await choose('source', 'Assumed range')
    expect(screen.getAllByText(/, assumed$/).length).toBeGreaterThan(2)
    expect(screen.getByText(/Both redshifts are an assumed range, not a measurement/)).toBeInTheDocument()
  })

  it('with a fault are told in a sentence and keep from saving: no number, negative, source before the lens', async () => {
    deskRoom()
    await start()
    circle()
    await choose('lens', 'Typed')
    await choose('source', 'Typed')
    type('Redshift of the lens: value', 'abc')
    expect(screen.getAllByText(/The redshift of the lens is not a number/)[0]).toBeInTheDocument()
    type('Redshift of the lens: value', '-0.5')
    expect(screen.getAllByText('The redshift of the lens must be above 0.')[0]).toBeInTheDocument()
    type('Redshift of the lens: value', '0,8')
    type('Redshift of the source: value', '0.5')
    expect(
      screen.getAllByText(/The source \(redshift 0.5\) must lie behind the lens \(redshift 0.8\)/)[0],
    ).toBeVisible()
    expect(screen.getByText('Save')).toBeDisabled()
    type('Redshift of the source: value', '2')
    expect(screen.getByText('Save')).toBeEnabled()
  })

  it('outside what galaxies have are pointed out and not refused', async () => {
    deskRoom({ lensRedshift: 0.3, sourceRedshift: 1 })
    await start()
    for (const [east, north] of [
      [6, 0],
      [0, 6],
      [-6, 0],
    ])
      press(east, north)
    expect(screen.getByText(/An Einstein radius above 3 arcsec is that of a group/)).toBeInTheDocument()
    expect(screen.getByText('Save')).toBeEnabled()
  })
})

describe('saving', () => {
  it('sends points, shape, redshifts and remark once however often it is pressed, and says what came of it', async () => {
    const { save } = deskRoom({ lensRedshift: 0.3 })
    await start()
    circle()
    await userEvent.type(screen.getByRole('textbox', { name: 'Remark' }), 'blue arc')
    await userEvent.click(screen.getByText('Save'))
    await waitFor(() => expect(screen.getByText('Saved.')).toBeInTheDocument())
    expect(save).toHaveBeenCalledOnce()
    expect(save.mock.calls[0][0]).toMatchObject({
      view: 'colour',
      pixelScaleArcsec: 0.2,
      shape: { kind: 'circle', centre: 'free' },
      redshifts: { lens: { basis: 'given' }, source: { basis: 'unknown' } },
      remark: 'blue arc',
    })
    expect(save.mock.calls[0][0].points).toHaveLength(4)
  })

  it('that did not reach the server keeps everything and sends the same again under the same id', async () => {
    const { save } = deskRoom()
    save.mockRejectedValueOnce(new Error('gone'))
    await start()
    circle()
    await userEvent.click(screen.getByText('Save'))
    await waitFor(() => expect(screen.getByText(/The server did not answer/)).toBeInTheDocument())
    await userEvent.click(screen.getByText('Save'))
    await waitFor(() => expect(save).toHaveBeenCalledTimes(2))
    expect(save.mock.calls[1][0].uid).toBe(save.mock.calls[0][0].uid)
  })

  it('is offered to nobody who only reads', () => {
    deskRoom({ mayMeasure: false })
    expect(screen.queryByRole('button', { name: 'Measure an arc' })).toBeNull()
  })
})

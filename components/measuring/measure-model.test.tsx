import { fireEvent, screen, waitFor } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { describe, expect, it } from 'vitest'
import { CONCORDANCE } from '@/lib/science/lensing/cosmology'
import { imagesOf } from '@/lib/work/measuring/fitted'
import type { MeasurementShown } from '@/lib/work/measuring/measurement-shown'
import { deskRoom, drag, press, stage } from './_desk-room'

const start = () => userEvent.click(screen.getByText('Would a lens do this?'))
const value = (label: string) => screen.getByLabelText<HTMLInputElement>(label).value
const set = (label: string, text: string) => {
  fireEvent.change(screen.getByLabelText(label), { target: { value: text } })
  fireEvent.blur(screen.getByLabelText(label))
}
const choose = async (name: RegExp) => fireEvent.click(screen.getByText(name, { selector: 'label' }))
const cells = () => screen.getAllByRole('row').map((row) => row.textContent)

/** A round lens without shear: the sphere, whose images are known in closed form. */
function sphere(radiusArcsec: string, sourceEast: string) {
  set('Einstein radius, ″', radiusArcsec)
  set('Axis ratio', '1')
  set('Source east, ″', sourceEast)
  set('Source north, ″', '0')
}

describe('a model by mouse and keys', () => {
  it('is moved by a drag of what is held, wherever on the picture the drag is', async () => {
    deskRoom()
    await start()
    const before = Number(value('Source east, ″'))
    drag([-5, -5], [-4.5, -5.2])
    expect(Number(value('Source east, ″'))).toBeCloseTo(before + 0.5, 9)
  })

  it('has its source go with the lens; a drag is undone as one act', async () => {
    deskRoom()
    await start()
    const before = Number(value('Source east, ″'))
    await choose(/✛ Lens/)
    drag([5, 5], [5.5, 5])
    expect(value('Lens east, ″')).toBe('0.500')
    expect(Number(value('Source east, ″'))).toBeCloseTo(before + 0.5, 9)
    await userEvent.click(screen.getByText('Undo'))
    expect(value('Lens east, ″')).toBe('0.000')
  })

  it('shows the numbers of the model to the last digit that it begins with, so that they can be worked with', async () => {
    deskRoom()
    await start()
    expect([value('Source east, ″'), value('Source north, ″'), value('Einstein radius, ″')]).toEqual([
      '0.120',
      '0.075',
      '1.500',
    ])
  })

  it('says within which bounds a number lies that was not taken, until another is typed', async () => {
    deskRoom()
    await start()
    set('Axis ratio', '-3')
    expect(value('Axis ratio')).toBe('0.75')
    expect(screen.getByText('‘-3’ was not taken: a number from 0.2 to 1.')).toBeInTheDocument()
    set('Axis ratio', '0.5')
    expect(screen.queryByText(/was not taken/)).toBeNull()
  })

  it('offers the redshift of a known object for the lens, and takes it over only when asked', async () => {
    deskRoom({ knownRedshifts: [{ name: 'Curlew Arc 3', redshift: 0.5 }] })
    await start()
    expect(screen.queryByLabelText('Redshift of the lens: value')).toBeNull()
    await userEvent.click(screen.getByText('Take 0.5, of Curlew Arc 3'))
    expect(value('Redshift of the lens: value')).toBe('0.5')
    expect(screen.queryByText(/Take 0.5/)).toBeNull()
  })

  it('takes hold of the handle that is pressed', async () => {
    deskRoom()
    await start()
    sphere('2', '0.3')
    set('Long axis, °', '90')
    // The short axis ends in the south, b sqrt f from the lens.
    drag([0, -2], [0, -2.5])
    expect(screen.getByLabelText('□ Radius')).toBeChecked()
    expect(value('Einstein radius, ″')).toBe('2.500')
  })

  it('follows arrow keys over the picture, steppers and typed numbers, and holds them within what a lens can be', async () => {
    const user = userEvent.setup()
    deskRoom()
    await start()
    sphere('1.2', '0.3')
    stage().focus()
    await user.keyboard('{ArrowLeft}{Shift>}{ArrowUp}{/Shift}')
    expect([value('Source east, ″'), value('Source north, ″')]).toEqual(['0.400', '1.000'])
    await user.click(screen.getByRole('button', { name: 'Einstein radius: more' }))
    expect(value('Einstein radius, ″')).toBe('1.250')
    screen.getByLabelText('Shear').focus()
    await user.keyboard('{ArrowUp}{ArrowUp}{ArrowDown}')
    expect(value('Shear')).toBe('0.01')
    fireEvent.change(screen.getByLabelText('Axis ratio'), { target: { value: '7' } })
    expect(screen.getByText('A number from 0.2 to 1.')).toBeInTheDocument()
    fireEvent.blur(screen.getByLabelText('Axis ratio'))
    expect(value('Axis ratio')).toBe('1.00')
  })
})

describe('the images', () => {
  it('of a sphere are those in closed form, with magnification and parity', async () => {
    deskRoom()
    await start()
    sphere('1.2', '0.3')
    // fixtures/lensing/lensing.json, sis_images: beta 0.3, theta_E 1.2: images at 1.5 and -0.9, magnified 5 and -3.
    expect(cells().slice(1)).toEqual(['1.50″, 0.00″5.0+', '−0.90″, 0.00″−3.0− mirrored'])
  })

  it('come with delays where there are redshifts: (1 + z_l) D_l D_s / (c D_ls) (x1² - x2²) / 2 for the sphere', async () => {
    deskRoom({ lensRedshift: 0.5, sourceRedshift: 1.5 })
    await start()
    sphere('1.2', '0.3')
    // lensing.json, sis_einstein_radius_and_mass: D_l 1259.083597, D_s 1745.542306, D_ls 990.0921481 Mpc; Mpc and c as in `constants`.
    const lengthM = ((1259.083597 * 1745.542306) / 990.0921481) * 3.085677581491367e22
    const days = (((1.5 * lengthM) / 299792458) * 4.84813681109536e-6 ** 2 * ((1.5 ** 2 - 0.9 ** 2) / 2)) / 86400
    expect(days).toBeGreaterThan(30)
    expect(cells().slice(1)).toEqual(['1.50″, 0.00″5.0+first', `−0.90″, 0.00″−3.0− mirrored${days.toFixed(1)} days`])
  })

  it('of a source exactly behind a round lens are a ring', async () => {
    deskRoom()
    await start()
    sphere('1.2', '0')
    expect(screen.getByText(/A ring: the source lies exactly behind/)).toBeInTheDocument()
  })

  it('of a group far wider than the cutout work too', async () => {
    deskRoom()
    await start()
    sphere('20', '5')
    expect(cells().slice(1)).toEqual(['25.00″, 0.00″5.0+', '−15.00″, 0.00″−3.0− mirrored'])
  })
})

describe('a fit', () => {
  const fit = async () => {
    await userEvent.click(screen.getByText('Fit'))
    await waitFor(() => expect(screen.getByText('Fit')).toBeEnabled())
  }

  it('of two images of a quasar finds the sphere that makes them, with its residual in arcsec and pixels', async () => {
    const { save } = deskRoom()
    await start()
    await choose(/Points/)
    press(1.5, 0)
    press(-0.9, 0)
    await choose(/^Radius$/)
    await fit()
    expect(value('Einstein radius, ″')).toBe('1.200')
    expect(value('Source east, ″')).toBe('0.300')
    expect(screen.getByText('Fitted: residual 0.000″, 0.00 px')).toBeInTheDocument()
    await userEvent.click(screen.getByText('Save'))
    expect(save.mock.calls[0][0].shape).toMatchObject({ kind: 'model', fit: { kind: 'sphere', pointsAre: 'images' } })
  })

  it('of four images finds shape and shear; moved by hand afterwards it is no fit any more', async () => {
    const { save } = deskRoom()
    await start()
    const lens = { einsteinRadiusArcsec: 1.3, axisRatio: 0.7, positionAngleDeg: 40, centre: { east: 0, north: 0 } }
    const images = imagesOf(lens, { east: 0.05, north: 0.08 }, Number.NaN)
    expect(images).toHaveLength(4)
    await choose(/Points/)
    for (const { east, north } of images) press(east, north)
    await choose(/^\+ shape$/)
    await fit()
    expect(value('Einstein radius, ″')).toBe('1.300')
    expect(value('Axis ratio')).toBe('0.70')
    expect(value('Long axis, °')).toBe('40')
    await userEvent.click(screen.getByRole('button', { name: 'Axis ratio: more' }))
    expect(screen.queryByText(/^Fitted:/)).toBeNull()
    expect(screen.getByText(/^By hand: residual 0\.0\d\d″/)).toBeInTheDocument()
    await userEvent.click(screen.getByText('Save'))
    expect(save.mock.calls[0][0].shape).toMatchObject({ fit: null })
  })

  it('of too few points is refused in a sentence, and the model stays', async () => {
    deskRoom()
    await start()
    set('Einstein radius, ″', '1.1')
    await choose(/Points/)
    press(1.5, 0)
    await fit()
    expect(screen.getByRole('alert')).toHaveTextContent(/1 point gives 2 numbers \(each image gives two\)/)
    expect(value('Einstein radius, ″')).toBe('1.100')
  })
})

describe('a kept model', () => {
  const kept: MeasurementShown = {
    id: 4,
    by: 'G03',
    own: false,
    kind: 'model',
    at: '2026-12-01T12:00:00.000Z',
    stands: true,
    endedBy: null,
    view: 'colour',
    pixelScaleArcsec: 0.2,
    points: [],
    fitted: {
      kind: 'model',
      lens: { einsteinRadiusArcsec: 1.2, axisRatio: 1, positionAngleDeg: 0, centre: { east: 0, north: 0 } },
      source: { east: 0.3, north: 0 },
      sourceRadiusArcsec: 0.2,
      fit: null,
      residualArcsec: null,
      residualPixels: null,
      images: imagesOf(
        { einsteinRadiusArcsec: 1.2, axisRatio: 1, positionAngleDeg: 0 },
        { east: 0.3, north: 0 },
        Number.NaN,
      ),
    },
    einsteinRadiusArcsec: 1.2,
    errorArcsec: null,
    lens: null,
    source: null,
    cosmology: CONCORDANCE,
    mass: null,
    remark: 'two images',
  }

  it('of somebody else opens read-only with its numbers, and can be gone on from', async () => {
    const { save } = deskRoom({ standing: [kept] })
    await userEvent.click(screen.getByRole('button', { name: 'Open' }))
    expect(screen.getByRole('heading', { name: 'Measured by G03' })).toBeInTheDocument()
    expect(screen.queryByLabelText('Axis ratio')).toBeNull()
    drag([0, 0], [2, 2])
    press(1, 1)
    expect(cells().slice(1)).toEqual(['1.50″, 0.00″5.0+', '−0.90″, 0.00″−3.0− mirrored'])
    expect(screen.queryByRole('button', { name: /^Save/ })).toBeNull()
    // Under it the own model lies as it was.
    await userEvent.click(screen.getByText('Leave'))
    await start()
    expect(value('Axis ratio')).toBe('0.75')
    await userEvent.click(screen.getByText('Leave'))
    await userEvent.click(screen.getByText('Open'))
    await userEvent.click(screen.getByRole('button', { name: 'Go on from here' }))
    expect(value('Einstein radius, ″')).toBe('1.200')
    await userEvent.click(screen.getByText('Save'))
    expect(save).toHaveBeenCalledOnce()
  })

  it('opens for a reader too, who can change nothing', async () => {
    deskRoom({ standing: [kept], mayMeasure: false })
    expect(screen.queryByRole('button', { name: 'Withdraw' })).toBeNull()
    await userEvent.click(screen.getByRole('button', { name: 'Open' }))
    expect(screen.queryByRole('button', { name: 'Go on from here' })).toBeNull()
    await userEvent.click(screen.getByRole('button', { name: 'Leave' }))
    expect(screen.queryByRole('application')).toBeNull()
  })

  it('of one’s own can be withdrawn, and several people’s are combined with those apart pointed out', async () => {
    const own = { ...kept, own: true }
    const { withdraw } = deskRoom({
      standing: [own, { ...kept, id: 5, by: 'G04' }],
      combined: {
        count: 2,
        radiusArcsec: 1.2,
        errorArcsec: 0.05,
        isWeighted: true,
        medianArcsec: 1.2,
        scatterArcsec: 0.07,
        smallestArcsec: 1.15,
        largestArcsec: 1.25,
        chiSquared: 1,
        scaleFactor: 1,
        apart: [1],
        notes: [],
        measurementIds: [4, 5],
        apartIds: [5],
      },
    })
    expect(screen.getByText('2 people, scatter 0.07″, from 1.15″ to 1.25″')).toBeInTheDocument()
    expect(screen.getByText(/Lies apart from the others/).closest('li')).toHaveTextContent('G04')
    await userEvent.click(screen.getByRole('button', { name: 'Withdraw' }))
    expect(withdraw).toHaveBeenCalledWith(4)
  })
})

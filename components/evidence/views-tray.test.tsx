import { render, screen } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { useState } from 'react'
import { describe, expect, it } from 'vitest'
import { benchCandidate } from '@/components/bench/_candidates'
import { LightStore } from '@/components/light/light-store'
import { ViewsTray } from './views-tray'

const { views, geometry } = benchCandidate(1)
const light = new LightStore('views-tray')

function Tray({ blinking }: { blinking: boolean }) {
  const [chosen, setChosen] = useState(0)
  const pictures = { views, geometry, planesUrl: null, recipe: 1, closeFieldArcsec: 12 }
  return (
    <ViewsTray
      name="SWS-1"
      pictures={pictures}
      chosen={chosen}
      onChoose={setChosen}
      keys
      viewKeys
      light={light}
      blinking={blinking}
    />
  )
}

const shown = () => screen.getByRole('img', { name: /of SWS-1/ }).getAttribute('alt')

describe('the tray of views', () => {
  it('shows the view before for as long as it blinks, and only then', async () => {
    const user = userEvent.setup()
    const { rerender } = render(<Tray blinking={false} />)
    await user.click(screen.getByRole('button', { name: 'Show deep' }))
    expect(shown()).toBe('deep of SWS-1')
    rerender(<Tray blinking />)
    expect(shown()).toBe('colour of SWS-1')
    rerender(<Tray blinking={false} />)
    expect(shown()).toBe('deep of SWS-1')
  })

  it('offers Light with its key', () => {
    render(<Tray blinking={false} />)
    expect(screen.getByRole('button', { name: /Light$/ })).toHaveAttribute('aria-expanded', 'false')
  })
})

/** What the simulator can make: five kinds of lens, seven things that are taken for lenses. */

export type LensKind = 'lens-arc' | 'lens-ring' | 'lens-quad' | 'lens-double' | 'lens-group'

export type ImpostorKind =
  'spiral' | 'ring-galaxy' | 'merger' | 'edge-on' | 'star-spikes' | 'satellite-trail' | 'elliptical'

export type SimulatedKind = LensKind | ImpostorKind

export const SIMULATED_KINDS: readonly SimulatedKind[] = [
  'lens-arc',
  'lens-ring',
  'lens-quad',
  'lens-double',
  'lens-group',
  'spiral',
  'ring-galaxy',
  'merger',
  'edge-on',
  'star-spikes',
  'satellite-trail',
  'elliptical',
]

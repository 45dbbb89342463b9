export interface RenderedView {
  /** As in the recipe: 'colour', 'deep', 'residual', 'band:g', ... */
  key: string
  width: number
  height: number
  channels: 1 | 3
  /** Row 0 is the top row; RGB interleaved when channels is 3. */
  pixels: Uint8Array
  /** What a viewer must know about this picture, in a sentence; null when nothing. */
  note: string | null
}

import { demoCandidates, demoFiles } from '@/fixtures/demo/demo-candidates'

export interface Delivery {
  name: string
  mimeType: string
  buffer: Buffer
}

const fits = (name: string, bytes: Uint8Array): Delivery => ({
  name,
  mimeType: 'application/fits',
  buffer: Buffer.from(bytes),
})

/** Twelve candidates in three bands, of which one file is cut short, and one file a second time under another name. */
export function deliveries(): { files: Delivery[]; names: string[]; damaged: string; duplicate: string } {
  const candidates = demoCandidates().slice(0, 12)
  const files = candidates.flatMap(demoFiles).map(({ name, bytes }) => fits(name, bytes))
  const damaged = files.findIndex(({ name }) => name === `${candidates[11].name}_i.fits`)
  files[damaged] = fits(files[damaged].name, files[damaged].buffer.subarray(0, 9000))
  const copy = fits('copy_of_the_first.fits', files[0].buffer)
  return {
    files: [...files, copy],
    names: candidates.map(({ name }) => name),
    damaged: files[damaged].name,
    duplicate: copy.name,
  }
}

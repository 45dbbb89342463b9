import { describe, expect, it } from 'vitest'
import { chosenFiles, droppedFiles } from './collect-files'

const file = (name: string, relativePath = '') =>
  Object.defineProperty(new File(['x'], name), 'webkitRelativePath', { value: relativePath })

const names = ({ files }: { files: { name: string }[] }) => files.map(({ name }) => name)

const fileEntry = (fullPath: string, fails = false) => ({
  isFile: true,
  fullPath,
  file: (resolve: (file: File) => void, reject: (error: Error) => void) =>
    fails ? reject(new Error('gone')) : resolve(file(fullPath)),
})

/** Gives two entries at a time, as browsers give a folder in parts. */
function folderEntry(fullPath: string, children: unknown[]) {
  return {
    isFile: false,
    fullPath,
    createReader: () => {
      let at = 0
      return { readEntries: (resolve: (entries: unknown[]) => void) => resolve(children.slice(at, (at += 2))) }
    },
  }
}

const drop = (entries: unknown[]) =>
  ({
    files: [],
    items: entries.map((entry) => ({ kind: 'file', webkitGetAsEntry: () => entry })),
  }) as unknown as DataTransfer

describe('files that were chosen or dropped', () => {
  it('come with manifests first and then by name, so that the bands of a candidate come together', () => {
    expect(names(chosenFiles([file('b_g.fits'), file('list.csv'), file('a_r.fits'), file('a_g.fits')]))).toEqual([
      'list.csv',
      'a_g.fits',
      'a_r.fits',
      'b_g.fits',
    ])
  })

  it('keep the path of a chosen folder', () => {
    expect(names(chosenFiles([file('g.fits', 'north/SWS1/g.fits')]))).toEqual(['north/SWS1/g.fits'])
  })

  it('come out of dropped folders in folders, however many parts the browser gives them in', async () => {
    const inner = folderEntry('/north/deep', [fileEntry('/north/deep/c.fits')])
    const folder = folderEntry('/north', [fileEntry('/north/a.fits'), fileEntry('/north/b.fits'), inner])
    expect(names(await droppedFiles(drop([folder, fileEntry('/z.fits')])))).toEqual([
      'north/a.fits',
      'north/b.fits',
      'north/deep/c.fits',
      'z.fits',
    ])
  })

  it('leave out hidden files and what cannot be opened, and say so', async () => {
    const folder = folderEntry('/n', [
      fileEntry('/n/.DS_Store'),
      fileEntry('/n/gone.fits', true),
      fileEntry('/n/a.fits'),
    ])
    const chosen = await droppedFiles(drop([folder]))
    expect(names(chosen)).toEqual(['n/a.fits'])
    expect(chosen.left).toEqual(['n/gone.fits', 'n/.DS_Store'])
  })
})

import { readFileSync, readdirSync } from 'node:fs'
import path from 'node:path'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { packTar, packZip, type MemberToPack } from '@/tests/_support/archives'
import { cutoutFits } from '@/tests/_support/cutouts'
import { makeIntake, type IntakeScenario } from '@/tests/_support/intake'
import { archiveLimits } from './archive-limits'
import { unpackArchives } from './unpack-archives'

let intake: IntakeScenario
beforeEach(async () => {
  intake = await makeIntake()
})
afterEach(() => intake.remove())

const MIB = 1024 * 1024
const usual = archiveLimits(16 * MIB, 64 * MIB)

const unpack = (limits = usual) =>
  unpackArchives({ db: intake.db, blobs: intake.tools.blobs, limits }, intake.campaign.id, async () => {})

const cutout = (name: string, seed: number): MemberToPack => ({ name, bytes: cutoutFits({ seed }) })
const threeBands = ['g', 'r', 'i'].map((band, index) => cutout(`north/SWS1_${band}.fits`, index + 1))
const problems = () => intake.db.selectFrom('file_problem').select('sentence').orderBy('id').execute()
const fixture = (name: string) => readFileSync(path.join('fixtures/fits', name))
const text = (content: string) => new TextEncoder().encode(content)

describe('an archive', () => {
  it.each([
    ['night1.zip', async () => packZip(threeBands)],
    ['night1.tar', () => packTar(threeBands)],
    ['night1.tar.gz', () => packTar(threeBands, { gzip: true })],
    ['night1.tgz', () => packTar(threeBands, { gzip: true })],
    ['gzip-named-otherwise.tar', () => packTar(threeBands, { gzip: true })],
  ])('%s comes out as one file a member, which are read like any', async (name, pack) => {
    await intake.deliver(name, await pack())
    await unpack()
    await intake.read()
    expect(await intake.fates()).toEqual({
      [name]: 'read',
      [`${name}/north/SWS1_g.fits`]: 'imaged',
      [`${name}/north/SWS1_r.fits`]: 'imaged',
      [`${name}/north/SWS1_i.fits`]: 'imaged',
    })
    expect(await intake.reasonOf(name)).toBe('3 files taken out of it.')
    const row = await intake.db
      .selectFrom('file')
      .select('sha256')
      .where('name', 'like', '%_g.fits')
      .executeTakeFirstOrThrow()
    expect(Buffer.from(await intake.tools.blobs.read(row.sha256)).equals(threeBands[0].bytes)).toBe(true)
  })

  it('gives its manifest before its images, and leaves hidden files and folders out', async () => {
    const members = [
      { name: 'images/', bytes: new Uint8Array() },
      cutout('images/a.fits', 1),
      { name: '__MACOSX/._a.fits', bytes: text('x') },
      { name: 'list.csv', bytes: text('file,candidate,band\na.fits,SWS7,r\n') },
    ]
    await intake.deliver('n.zip', packZip(members))
    await unpack()
    const names = await intake.db.selectFrom('file').select('name').orderBy('id').execute()
    expect(names.map(({ name }) => name)).toEqual(['n.zip', 'n.zip/list.csv', 'n.zip/images/a.fits'])
    expect(await intake.reasonOf('n.zip')).toBe('2 files taken out of it, 1 hidden ones left out.')
    await intake.read()
    expect((await intake.fates())['n.zip/images/a.fits']).toBe('imaged')
  })

  it('of the same name with some other bytes replaces only the members that differ', async () => {
    await intake.deliver('n.zip', packZip(threeBands))
    await unpack()
    await intake.read()
    const before = await intake.db.selectFrom('file').select(['id', 'name']).execute()
    await intake.deliver('n.zip', packZip([cutout('north/SWS1_g.fits', 9), ...threeBands.slice(1)]))
    await unpack()
    await intake.read()
    const after = await intake.db.selectFrom('file').select(['id', 'name', 'replaced_by', 'fate']).execute()
    expect(after.filter((file) => file.name.includes('/') && !before.some(({ id }) => id === file.id))).toMatchObject([
      { name: 'n.zip/north/SWS1_g.fits', fate: 'imaged', replaced_by: null },
    ])
    expect(after.filter(({ replaced_by }) => replaced_by !== null)).toHaveLength(2)
  })

  it('goes on after a kill behind what it had, and puts nothing back that was corrected meanwhile', async () => {
    await intake.deliver('n.zip', packZip(threeBands))
    await unpack()
    const corrected = cutoutFits({ seed: 77 })
    await intake.deliver('n.zip/north/SWS1_g.fits', corrected)
    // As a kill before its last step leaves it.
    await intake.db.updateTable('file').set({ fate: 'stored', reason: null }).where('kind', '=', 'archive').execute()
    await unpack()
    await intake.read()
    const g = await intake.db.selectFrom('file').selectAll().where('name', 'like', '%_g.fits').orderBy('id').execute()
    expect(g.map(({ replaced_by, fate }) => [replaced_by, fate])).toEqual([
      [g[1].id, 'duplicate'],
      [null, 'imaged'],
    ])
    expect((await intake.fates())['n.zip']).toBe('read')
  })
})

describe('an archive that is refused', () => {
  const refused: [string, string, () => Promise<Uint8Array>, RegExp][] = [
    [
      'unsafe-archive',
      'has ../ and absolute names',
      async () => fixture('bad_zip_traversal.zip'),
      /'\.\.\/\.\.\/\.\.\/\.\.\/tmp\/evil\.fits'/,
    ],
    [
      'archive-bomb',
      'unpacks to thousands of times its size',
      async () => fixture('bad_zip_bomb.zip'),
      /more than 100 times its size/,
    ],
    [
      'unsafe-archive',
      'has a Windows path',
      async () => packZip([...threeBands, cutout('C:\\x.fits', 4)]),
      /absolute path/,
    ],
    ['unsafe-archive', 'has a ..\\ name', async () => packZip([cutout('a\\..\\..\\x.fits', 4)]), /leads out of it/],
    [
      'unsafe-archive',
      'has a link',
      async () => packZip([...threeBands, { ...cutout('l.fits', 4), mode: 0o120777 }]),
      /'l\.fits', which is a link/,
    ],
    [
      'encrypted-archive',
      'is encrypted',
      async () => packZip([{ ...cutout('a.fits', 4), encrypted: true }]),
      /'a\.fits' in the archive is encrypted/,
    ],
    [
      'encrypted-archive',
      'is encrypted, and its sizes do not fit that',
      async () => packZip([...threeBands, { ...cutout('a.fits', 4), encrypted: true, method: 0 }]),
      /'a\.fits' in the archive is encrypted/,
    ],
    [
      'encrypted-archive',
      'is encrypted and cut off',
      async () => packZip([{ ...cutout('a.fits', 4), encrypted: true }, ...threeBands]).subarray(0, -60),
      /'a\.fits' in the archive is encrypted/,
    ],
    ['unsafe-archive', 'is a tar with ../', () => packTar([...threeBands, cutout('../x.fits', 4)]), /leads out of it/],
    ['unsafe-archive', 'is a tar with an absolute name', () => packTar([cutout('/etc/x.fits', 4)]), /absolute path/],
    [
      'unsafe-archive',
      'is a tar with a symbolic link',
      () => packTar([...threeBands, { name: 'l', bytes: new Uint8Array(), type: 'symlink', linkname: '/etc/passwd' }]),
      /'l', which is a link/,
    ],
    [
      'unsafe-archive',
      'is a tar with a device',
      () => packTar([...threeBands, { name: 'd', bytes: new Uint8Array(), type: 'character-device' }], { gzip: true }),
      /which is a device/,
    ],
    ['not-an-archive', 'is none', async () => text('<html>Please log in</html>'), /no ZIP and no tar/],
    ['empty', 'is empty', async () => new Uint8Array(), /empty \(0 bytes\)/],
    ['empty-archive', 'is a zip of nothing', async () => packZip([]), /holds not one/],
    ['empty-archive', 'is a tar.gz of nothing', () => packTar([], { gzip: true }), /holds not one/],
    ['empty-archive', 'has hidden files only', async () => packZip([cutout('__MACOSX/._x', 1)]), /only hidden ones/],
    [
      'damaged-archive',
      'has a first file whose sizes do not agree',
      async () => packZip([{ ...cutout('a.fits', 4), method: 0 }]),
      /'a\.fits' is lost/,
    ],
    [
      'damaged-archive',
      'is cut off in its first file',
      async () => packZip(threeBands).subarray(0, 200),
      /none of its files can be found whole/,
    ],
  ]
  it.each(refused)(
    'as %s because it %s says so, and nothing of it is taken or written',
    async (fault, _, pack, says) => {
      await intake.deliver('n.zip', await pack())
      const before = readdirSync('/tmp').sort()
      await unpack()
      expect(await intake.fates()).toEqual({ 'n.zip': `refused ${fault}` })
      expect(await intake.reasonOf('n.zip')).toMatch(says)
      expect(readdirSync('/tmp').filter((name) => name.includes('evil'))).toEqual([])
      expect(before.filter((name) => name.includes('evil'))).toEqual([])
    },
  )

  const many = Array.from({ length: 12 }, (_, index) => cutout(`SWS${index}_g.fits`, index))
  it.each([
    ['zip', async () => packZip(many)],
    ['tar.gz', () => packTar(many, { gzip: true })],
  ])('a %s with more files than may be is refused before any is unpacked', async (ending, pack) => {
    await intake.deliver(`n.${ending}`, await pack())
    await unpack({ ...usual, mostMembers: 11 })
    expect(await intake.fates()).toEqual({ [`n.${ending}`]: 'refused archive-bomb' })
    expect(await intake.reasonOf(`n.${ending}`)).toMatch(/more than 11 files/)
  })

  it('a tar.gz of blank bytes is stopped by its ratio, and by its size unpacked', async () => {
    const blank = { name: 'a.fits', bytes: new Uint8Array(4 * MIB) }
    await intake.deliver('a.tgz', await packTar([blank], { gzip: true }))
    await unpack({ ...usual, ratioFromBytes: MIB })
    expect(await intake.reasonOf('a.tgz')).toMatch(/100 times its size/)
    await intake.deliver('b.tgz', await packTar([{ ...blank, name: 'b.fits' }], { gzip: true }))
    await unpack({ ...usual, mostBytes: MIB })
    expect(await intake.reasonOf('b.tgz')).toMatch(/more than 1 MiB/)
    expect(Object.keys(await intake.fates())).toEqual(['a.tgz', 'b.tgz'])
  })
})

describe('an archive of which a part is lost', () => {
  it('as a zip cut off keeps the members that are whole', async () => {
    const whole = packZip(threeBands)
    await intake.deliver('n.zip', whole.slice(0, Math.floor(whole.byteLength * 0.6)))
    await unpack()
    await intake.read()
    expect(await intake.fates()).toEqual({ 'n.zip': 'refused damaged-archive', 'n.zip/north/SWS1_g.fits': 'imaged' })
    expect(await intake.reasonOf('n.zip')).toBe(
      "1 file taken out of it. The archive is cut off: what came after 'north/SWS1_g.fits' is lost.",
    )
  })

  it('as a tar.gz cut off keeps the members that are whole', async () => {
    const whole = await packTar(threeBands, { gzip: true })
    await intake.deliver('n.tgz', whole.slice(0, Math.floor(whole.byteLength * 0.8)))
    await unpack()
    const names = Object.keys(await intake.fates())
    expect(names).toContain('n.tgz/north/SWS1_g.fits')
    expect(names).not.toContain('n.tgz/north/SWS1_i.fits')
    expect(await intake.reasonOf('n.tgz')).toMatch(/What came after 'north\/SWS1_[gr]\.fits' is lost/)
  })

  it('loses only the member whose checksum is wrong, and that by name', async () => {
    const [g, r, i] = threeBands
    await intake.deliver('n.zip', packZip([g, { ...r, crc: 1 }, i]))
    await unpack()
    expect(Object.keys(await intake.fates())).toEqual(['n.zip', 'n.zip/north/SWS1_g.fits', 'n.zip/north/SWS1_i.fits'])
    expect((await problems())[0].sentence).toMatch(/^'north\/SWS1_r\.fits' is lost: The checksum/)
  })

  it('does not open an archive inside it, and says so', async () => {
    await intake.deliver('n.zip', packZip([...threeBands, { name: 'inner.zip', bytes: packZip(threeBands) }]))
    await unpack()
    expect(Object.keys(await intake.fates())).toHaveLength(4)
    expect((await intake.fates())['n.zip']).toBe('read')
    expect(await problems()).toEqual([
      { sentence: "'inner.zip' is an archive inside the archive and is not opened. Send its files themselves." },
    ])
  })

  it('does not take a member that is larger than a file may be', async () => {
    await intake.deliver('n.zip', packZip([...threeBands, { name: 'big.fits', bytes: new Uint8Array(3 * MIB) }]))
    await unpack({ ...usual, mostMemberBytes: MIB })
    expect((await problems())[0].sentence).toBe("'big.fits' is lost: it has more than 1 MiB.")
    expect(Object.keys(await intake.fates())).toHaveLength(4)
  })

  it('takes a name that is there twice once, and says so', async () => {
    await intake.deliver('n.zip', packZip([cutout('SWS1_g.fits', 1), cutout('SWS1_g.fits', 2)]))
    await unpack()
    expect((await problems())[0].sentence).toBe("The archive holds 'SWS1_g.fits' twice; only the first is taken.")
  })
})

import { open } from 'node:fs/promises'
import type { Refusal } from '../refusals'
import type { ArchiveLimits } from './archive-limits'
import type { ArchiveReader, ArchiveScan } from './archive-member'
import { cutZipReader } from './read-cut-zip'
import { tarReader } from './read-tar'
import { zipReader } from './read-zip'

const TAR_BLOCK = 512

export type OpenedArchive = { reader: ArchiveReader; members: number } | { refusal: Refusal }

/** Opens an archive by what its bytes are, whatever its name says, and looks through it. Nothing is unpacked yet. */
export async function openArchive(
  path: string,
  name: string,
  bytes: number,
  limits: ArchiveLimits,
): Promise<OpenedArchive> {
  if (bytes === 0) return { refusal: { fault: 'empty', reason: 'The file is empty (0 bytes).' } }
  const head = await readHead(path)
  const magic = head.subarray(0, 4).toString('latin1')
  if (magic === 'PK\u0003\u0004' || magic === 'PK\u0005\u0006') return openZip(path, bytes, limits)
  const isGzip = head[0] === 0x1f && head[1] === 0x8b
  if (isGzip || isTarHeader(head)) return looked(tarReader(path, bytes, isGzip, limits))
  const reason = `'${name}' is no ZIP and no tar archive that is read here (plain or packed by gzip). Send one of these, or the files themselves.`
  return { refusal: { fault: 'not-an-archive', reason } }
}

async function openZip(path: string, bytes: number, limits: ArchiveLimits): Promise<OpenedArchive> {
  try {
    return await looked(zipReader(path, bytes, limits))
  } catch {
    // Without a directory the whole members can still be found by their own headers.
    return looked(cutZipReader(path, bytes, limits))
  }
}

async function looked(reader: ArchiveReader): Promise<OpenedArchive> {
  const { refusal, members }: ArchiveScan = await reader.scan()
  return refusal ? { refusal } : { reader, members }
}

async function readHead(path: string): Promise<Buffer> {
  const file = await open(path, 'r')
  try {
    const head = Buffer.alloc(TAR_BLOCK)
    const { bytesRead } = await file.read(head, 0, TAR_BLOCK, 0)
    return head.subarray(0, bytesRead)
  } finally {
    await file.close()
  }
}

/** The sum of a header's bytes, with blanks for the sum itself, is written in it in octal (POSIX ustar, pax(1)). */
function isTarHeader(head: Buffer): boolean {
  if (head.byteLength < TAR_BLOCK) return false
  const written = parseInt(head.subarray(148, 156).toString('latin1').replaceAll('\0', ' ').trim(), 8)
  const sum = head.reduce((total, byte, index) => total + (index >= 148 && index < 156 ? 32 : byte), 0)
  return written === sum
}

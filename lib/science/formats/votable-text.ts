/** From the bytes of an XML file to its text, piece by piece: by byte-order mark, else by the encoding that the file declares. */

export type TextOrBytes = string | Uint8Array

/** The file cannot be XML text. The message is a sentence that says what to do. */
export class XmlTextError extends Error {
  readonly name = 'XmlTextError'
}

/** XML 1.0 appendix F: a byte-order mark, or the declaration, which is ASCII in the encodings that remain. */
function encodingOf(bytes: Uint8Array): string {
  if (bytes[0] === 0xff && bytes[1] === 0xfe) return 'utf-16le'
  if (bytes[0] === 0xfe && bytes[1] === 0xff) return 'utf-16be'
  if (bytes[0] === 0x3c && bytes[1] === 0) return 'utf-16le'
  if (bytes[0] === 0 && bytes[1] === 0x3c) return 'utf-16be'
  const start = String.fromCharCode(...bytes.subarray(0, 200))
  return /^(?:\xef\xbb\xbf)?<\?xml[^>]*\sencoding\s*=\s*["']([\w.-]+)["']/.exec(start)?.[1] ?? 'utf-8'
}

export class XmlTextDecoder {
  /** some bytes were none of the encoding and became U+FFFD */
  isDamaged = false
  private decoder: TextDecoder | null = null

  /** @throws XmlTextError for a gzip file and for an encoding that is not known. */
  write(piece: TextOrBytes): string {
    if (typeof piece === 'string') return this.decoder === null ? piece.replace(/^\ufeff/, '') : piece
    if (piece.length === 0) return ''
    this.decoder ??= decoderFor(piece)
    return this.noteDamage(this.decoder.decode(piece, { stream: true }))
  }

  end(): string {
    return this.decoder === null ? '' : this.noteDamage(this.decoder.decode())
  }

  private noteDamage(text: string): string {
    if (!this.isDamaged && text.includes('\ufffd')) this.isDamaged = true
    return text
  }
}

function decoderFor(bytes: Uint8Array): TextDecoder {
  if (bytes[0] === 0x1f && bytes[1] === 0x8b) {
    throw new XmlTextError('This file is compressed with gzip. Unpack it and choose the file inside.')
  }
  if (bytes[0] === 0x50 && bytes[1] === 0x4b) {
    throw new XmlTextError('This file is a zip archive. Unpack it and choose the VOTable inside.')
  }
  const encoding = encodingOf(bytes)
  try {
    return new TextDecoder(encoding)
  } catch {
    throw new XmlTextError(
      `The file says that its encoding is ${encoding}, which is not known. Save it with the encoding UTF-8.`,
    )
  }
}

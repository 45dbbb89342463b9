import { z } from 'zod'

/** Control characters but tab and line feed: XML 1.0 cannot hold them, and no table shows them. */
const UNSHOWN = /[\u0000-\u0008\u000b-\u001f\u007f]/

/**
 * Text as a person writes it: line ends become line feeds (browsers send CR LF from forms), blanks at the ends go, and control
 * characters, which would come out of CSV and VOTable as different things, are refused.
 * @param what begins the sentence, such as `The remark`.
 */
export const plainText = (what: string) =>
  z
    .string()
    .transform((text) => text.replace(/\r\n?/g, '\n').trim())
    .refine(
      (text) => !UNSHOWN.test(text),
      `${what} holds a character that cannot be shown. Type it again or paste plain text.`,
    )

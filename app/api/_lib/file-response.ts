import { textResponse } from './text-response'

/**
 * Text as a file to save, sent as the client takes it. The first piece is made before anything is sent, so that a failure
 * there is still a problem document; a later one breaks the connection off, which the client sees as an incomplete file. A
 * client that goes away ends the text, and with it whatever the text was being made from.
 */
export function fileResponse(file: {
  fileName: string
  contentType: string
  text: AsyncGenerator<string, void, void>
}): Promise<Response> {
  return textResponse(file.text, {
    'content-type': file.contentType,
    // The names are made of slugs: ASCII without quotes.
    'content-disposition': `attachment; filename="${file.fileName}"`,
    'x-content-type-options': 'nosniff',
    'cache-control': 'private, no-store',
  })
}

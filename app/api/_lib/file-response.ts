/**
 * Text as a file to save, sent as the client takes it. The first piece is made before anything is sent, so that a failure
 * there is still a problem document; a later one breaks the connection off, which the client sees as an incomplete file. A
 * client that goes away ends the text, and with it whatever the text was being made from.
 */
export async function fileResponse(file: {
  fileName: string
  contentType: string
  text: AsyncGenerator<string, void, void>
}): Promise<Response> {
  const encoder = new TextEncoder()
  const { text } = file
  const first = await text.next()
  const body = new ReadableStream<Uint8Array>(
    {
      start(controller) {
        if (first.done) controller.close()
        else controller.enqueue(encoder.encode(first.value))
      },
      async pull(controller) {
        const next = await text.next()
        if (next.done) controller.close()
        else controller.enqueue(encoder.encode(next.value))
      },
      async cancel() {
        await text.return()
      },
    },
    { highWaterMark: 1 },
  )
  return new Response(body, {
    headers: {
      'content-type': file.contentType,
      // The names are made of slugs: ASCII without quotes.
      'content-disposition': `attachment; filename="${file.fileName}"`,
      'x-content-type-options': 'nosniff',
      'cache-control': 'private, no-store',
    },
  })
}

/**
 * Text sent as the client takes it. The first piece is made before anything is sent, so that a failure there can still be told; a later
 * one breaks the connection off. A client that goes away ends the text.
 */
export async function textResponse(
  text: AsyncGenerator<string, void, void>,
  headers: Record<string, string>,
): Promise<Response> {
  const encoder = new TextEncoder()
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
  return new Response(body, { headers })
}

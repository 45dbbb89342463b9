/** One file to `PUT /api/campaigns/{slug}/files/{name}`. XMLHttpRequest because fetch does not tell how much has been sent. */
export interface SentFile {
  fate: string
}

/** Why a file did not arrive. After 'connection' the same file may be sent again by itself; 'refused' is the server's word. */
export class SendFault extends Error {
  override name = 'SendFault'
  constructor(
    readonly kind: 'connection' | 'refused' | 'cancelled',
    message: string,
  ) {
    super(message)
  }
}

export type SendFile = (
  address: string,
  file: File,
  onSent: (bytes: number) => void,
  signal: AbortSignal,
) => Promise<SentFile>

export function fileAddress(slug: string, name: string, columns?: string): string {
  const address = `/api/campaigns/${slug}/files/${name.split('/').map(encodeURIComponent).join('/')}`
  return columns === undefined ? address : `${address}?columns=${encodeURIComponent(columns)}`
}

/** Rejects with a SendFault whose message is the sentence for people. */
export const sendFile: SendFile = (address, file, onSent, signal) =>
  new Promise((resolve, reject) => {
    const request = new XMLHttpRequest()
    request.open('PUT', address)
    request.upload.onprogress = ({ loaded }) => onSent(loaded)
    request.onload = () => {
      const answer = parse(request.responseText)
      const { status } = request
      if (status >= 200 && status < 300) return resolve({ fate: String(answer.fate ?? 'stored') })
      const detail = typeof answer.detail === 'string' ? answer.detail : `The server answered ${status}.`
      // 408, 502, 503, 504: on the way, not by the server's own decision.
      reject(new SendFault([408, 502, 503, 504].includes(status) ? 'connection' : 'refused', detail))
    }
    request.onerror = () => {
      // A file that was moved or changed meanwhile fails in the same way as a connection.
      file
        .slice(0, 1)
        .arrayBuffer()
        .then(
          () => reject(new SendFault('connection', 'The connection broke before all of it was sent.')),
          () => reject(new SendFault('refused', 'It can no longer be read on this computer. Choose it again.')),
        )
    }
    request.onabort = () => reject(new SendFault('cancelled', 'Sending was cancelled.'))
    signal.addEventListener('abort', () => request.abort(), { once: true })
    request.send(file)
  })

function parse(text: string): Record<string, unknown> {
  try {
    const value: unknown = JSON.parse(text)
    return value !== null && typeof value === 'object' ? (value as Record<string, unknown>) : {}
  } catch {
    return {}
  }
}

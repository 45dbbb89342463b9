/** One file to `PUT /api/campaigns/{slug}/files/{name}`. XMLHttpRequest because fetch does not tell how much has been sent. */
export interface SentFile {
  fate: string
}

export type SendFile = (address: string, file: File, onSent: (bytes: number) => void) => Promise<SentFile>

export const fileAddress = (slug: string, name: string): string =>
  `/api/campaigns/${slug}/files/${name.split('/').map(encodeURIComponent).join('/')}`

const NO_CONNECTION = 'The connection broke before all of it was sent.'

/** Rejects with an Error whose message is the sentence for people. */
export const sendFile: SendFile = (address, file, onSent) =>
  new Promise((resolve, reject) => {
    const request = new XMLHttpRequest()
    request.open('PUT', address)
    request.upload.onprogress = ({ loaded }) => onSent(loaded)
    request.onload = () => {
      const answer = parse(request.responseText)
      if (request.status >= 200 && request.status < 300) resolve({ fate: String(answer.fate ?? 'stored') })
      else
        reject(new Error(typeof answer.detail === 'string' ? answer.detail : `The server answered ${request.status}.`))
    }
    request.onerror = () => reject(new Error(NO_CONNECTION))
    request.onabort = () => reject(new Error(NO_CONNECTION))
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

/** 128 random bits in hex. Unlike crypto.randomUUID it also exists where the site is not served over HTTPS. */
export function makeUid(): string {
  const bytes = crypto.getRandomValues(new Uint8Array(16))
  return Array.from(bytes, (byte) => byte.toString(16).padStart(2, '0')).join('')
}

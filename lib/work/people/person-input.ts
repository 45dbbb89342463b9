import { z } from 'zod'
import { plainText } from '@/lib/platform/problems/plain-text'

export const PersonName = plainText('The name').pipe(
  z
    .string()
    .min(1, 'Give the name that the others in your campaigns will see.')
    .max(80, 'The name has at most 80 characters.'),
)

export const EmailAddress = z
  .string()
  .trim()
  .max(254, 'The e-mail address has at most 254 characters.')
  .pipe(z.email('This is no e-mail address. It looks like curlew@saltmarsh.test.'))

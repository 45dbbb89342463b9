import { z } from 'zod'
import { toJson, type Json } from '@/db/schema/values'
import { MANIFEST_COLUMNS, type ManifestColumn } from './manifest-columns'

const NAMES = Object.keys(MANIFEST_COLUMNS) as [ManifestColumn, ...ManifestColumn[]]

/** From the address of a delivery: JSON of which header stands for which column, '' for none; kept in one spelling. */
export const ChosenColumns = z
  .string()
  .max(4000)
  .transform((text, context): Json<Record<string, string>> => {
    const sentence = `columns is a JSON object such as {"candidate":"MYID"} with some of ${NAMES.join(', ')}.`
    try {
      const chosen = z.partialRecord(z.enum(NAMES), z.string().max(200)).parse(JSON.parse(text))
      return toJson(Object.fromEntries(NAMES.flatMap((name) => (name in chosen ? [[name, chosen[name] ?? '']] : []))))
    } catch {
      context.addIssue({ code: 'custom', message: sentence })
      return z.NEVER
    }
  })

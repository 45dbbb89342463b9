'use client'

import { createContext } from 'react'

/** What a person has put in the place of a key that an action comes with; null where single keys are switched off. */
export const KeyNames = createContext<((key: string) => string | null) | null>(null)

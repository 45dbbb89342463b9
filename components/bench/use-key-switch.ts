'use client'

import { useKeys } from './use-keys'

/** Whether single-key shortcuts work for this person in this browser, for pages whose keys are fixed. */
export function useKeySwitch(personId: number): [boolean, (on: boolean) => void] {
  const { on, setOn } = useKeys(personId)
  return [on, setOn]
}

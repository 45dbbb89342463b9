'use client'

import { LogOut } from 'lucide-react'
import { signOut } from 'next-auth/react'

export function SignOutButton() {
  return (
    <button
      type="button"
      aria-label="Sign out"
      title="Sign out"
      onClick={() => void signOut({ callbackUrl: '/signin' })}
      className="grid size-9 place-items-center rounded-control text-mute hover:bg-raise hover:text-text"
    >
      <LogOut size={17} aria-hidden="true" />
    </button>
  )
}

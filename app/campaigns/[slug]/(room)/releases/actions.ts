'use server'

import { permitLead } from '@/app/_lib/action-permit'
import type { FormState } from '@/app/_lib/form-state'
import { roomAction } from '@/app/_lib/room-action'
import { config } from '@/lib/platform/config/config'
import { changeAccess, type AccessInput } from '@/lib/work/releases/change-access'
import { giveUpRelease, type GiveUpInput } from '@/lib/work/releases/give-up-release'
import { makeAgain } from '@/lib/work/releases/make-again'
import { publishRelease } from '@/lib/work/releases/publish-release'
import { releaseAddress } from '@/lib/work/releases/release-address'
import type { ReleaseInput } from '@/lib/work/releases/release-input'

/** Freezes a release and goes to the list, where its files are seen coming. */
export async function publishAction(slug: string, _before: FormState, form: FormData) {
  return roomAction(permitLead, slug, form, async ({ db, permit }) => {
    await publishRelease(db, permit, Object.fromEntries(form) as ReleaseInput)
    return { goTo: `/campaigns/${slug}/releases` }
  })
}

export async function accessAction(slug: string, number: number, _before: FormState, form: FormData) {
  return roomAction(permitLead, slug, form, async ({ db, permit }): Promise<FormState> => {
    const { access, token } = await changeAccess(db, permit, number, Object.fromEntries(form) as AccessInput)
    if (token) {
      const link = `${releaseAddress(config().siteUrl, slug, number)}?key=${token}`
      const done = 'Whoever has this link can read the release. It is shown this once; a new link ends this one.'
      return { done, values: { access, link } }
    }
    const said = { private: 'closed: leads and viewers of the campaign read it', public: 'public now' }
    return { done: `Release ${number} is ${access === 'public' ? said.public : said.private}.`, values: { access } }
  })
}

/** Asks for the files of a release once more where making them failed. */
export async function makeAgainAction(slug: string, number: number, _before: FormState) {
  return roomAction(permitLead, slug, new FormData(), async ({ db, permit }) => {
    await makeAgain(db, permit, number)
    return 'Its files are being made again; what is there is kept.'
  })
}

/** Leaves a release behind whose files cannot be made, so that the next one can be published. */
export async function giveUpAction(slug: string, number: number, _before: FormState, form: FormData) {
  return roomAction(permitLead, slug, form, async ({ db, permit }) => {
    await giveUpRelease(db, permit, number, Object.fromEntries(form) as GiveUpInput)
    return `Release ${number} is given up.`
  })
}

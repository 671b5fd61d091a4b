import { contract } from '#build/client-contract'
import type { StudioMembership, User } from '#shared/schemas/people'

/** Who is signed in, and the studios they belong to. */
export const useSessionStore = defineStore('session', () => {
  const { call } = useApi()
  const user = ref<User | null>(null)
  const studios = ref<StudioMembership[]>([])

  function take(me: { user: User, studios: StudioMembership[] }) {
    user.value = me.user
    studios.value = me.studios
    rememberStudio(me.studios[0]?.slug)
  }

  /** Asks once who is signed in. Throws `not_signed_in`. */
  async function ensure() {
    if (!user.value) take(await call(contract.me))
  }

  /** Asks again: a studio was joined, a name has changed. */
  async function refresh() {
    take(await call(contract.me))
  }

  async function signIn(email: string, password: string) {
    take(await call(contract.login, { body: { email, password } }))
  }

  async function signUp(person: { name: string, email: string, password: string, studioName?: string, invitationToken?: string }) {
    const { user, studio } = await call(contract.register, { body: person })
    take({ user, studios: [studio] })
    return studio
  }

  /** Into a class with a first name alone; the personal code is shown once. */
  async function joinClass(roomCode: string, firstName: string): Promise<string> {
    const { user, studio, personalCode } = await call(contract.joinClass, { body: { roomCode, firstName } })
    take({ user, studios: [studio] })
    return personalCode
  }

  async function returnToClass(personalCode: string) {
    take(await call(contract.returnToClass, { body: { personalCode } }))
  }

  async function signOut() {
    await call(contract.logout)
    forget()
  }

  function forget() {
    user.value = null
    studios.value = []
    rememberStudio(undefined)
  }

  return { user, studios, take, ensure, refresh, signIn, signUp, joinClass, returnToClass, signOut, forget }
})

const studioKey = 'emulside-studio'

/** Lets the first page offer the way back without asking the server who is there. */
export function rememberStudio(slug: string | undefined) {
  if (slug) localStorage.setItem(studioKey, slug)
  else localStorage.removeItem(studioKey)
}

export const rememberedStudio = (): string | null => localStorage.getItem(studioKey)

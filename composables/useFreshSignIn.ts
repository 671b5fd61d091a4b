import { contract } from '#build/client-contract'

/**
 * For what asks for a sign-in of the last ten minutes: `attempt` runs the work; where the service wants a fresh one,
 * the person is asked who they are (`SignInAgainDialog`) and the work done again.
 */
export function useFreshSignIn() {
  const { call } = useApi()
  const session = useSessionStore()
  const passkeys = usePasskeys()
  const isAsking = ref(false)
  const problem = ref<string | null>(null)
  const isBusy = ref(false)
  let waiting: (() => Promise<unknown>) | null = null

  async function attempt(work: () => Promise<unknown>): Promise<boolean> {
    isBusy.value = true
    problem.value = null
    try {
      await work()
      return true
    }
    catch (error) {
      if (error instanceof ApiError && error.code === 'fresh_sign_in_required') {
        waiting = work
        isAsking.value = true
      }
      else problem.value = sentenceOf(error)
      return false
    }
    finally {
      isBusy.value = false
    }
  }

  const after = (proof: () => Promise<unknown>) => attempt(async () => {
    await proof()
    const work = waiting
    waiting = null
    isAsking.value = false
    await work?.()
  })
  /** By the password, or a student's personal code. */
  const again = (secret: string) => after(() => session.user?.email ? call(contract.signInAgain, { body: { password: secret } }) : session.returnToClass(secret))
  const againByPasskey = () => after(passkeys.signInAgain)

  return { attempt, again, againByPasskey, isAsking, problem, isBusy }
}

import { contract } from '#build/client-contract'

interface WaysIn { passkeys: { origin: string | null }, openId: { name: string } | null }

/** Which ways of signing in this installation has, once it has said so; without an answer the password is there all the same. */
export function useWaysIn() {
  const { call } = useApi()
  const ways = useState<WaysIn | null>('ways-in', () => null)
  onMounted(async () => (ways.value ??= await call(contract.waysIn).catch(() => null)))
  return ways
}

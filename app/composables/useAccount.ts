export interface SignedIn { id: string, name: string, email: string }

/** Who is signed in, as the database knows it. Client state shared by the whole page. */
export function useAccount() {
  const account = useState<SignedIn | null>('account', () => null)
  const known = useState('account-known', () => false)
  const api = useApi()

  async function refresh() {
    account.value = (await api<{ account: SignedIn | null }>('/api/auth/me')).account
    known.value = true
  }
  async function signOut() {
    await api('/api/auth/sign-out', { method: 'POST' })
    account.value = null
    await navigateTo('/', { external: true })
  }
  return { account, known, refresh, signOut }
}

/** For pages that make no sense to a guest: to the sign-in page and back. */
export default defineNuxtRouteMiddleware((to) => {
  const { account } = useAccount()
  if (!account.value) return navigateTo({ path: '/sign-in', query: { to: to.fullPath } })
})

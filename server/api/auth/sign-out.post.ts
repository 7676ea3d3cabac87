export default apiHandler(async (event) => {
  await clearUserSession(event)
  return { signedOut: true }
})

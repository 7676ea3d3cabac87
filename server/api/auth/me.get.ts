/** Who is signed in, as the database knows it; null for a guest. */
export default apiHandler(async event => ({ account: await whoAsks(event) }))

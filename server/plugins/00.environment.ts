import { EnvironmentError } from '#server/config/environment'

/** A wrong setting stops the site at once with one line that names it. */
export default defineNitroPlugin(() => {
  try {
    settings()
  }
  catch (error) {
    if (!(error instanceof EnvironmentError)) throw error
    console.error(error.message)
    process.exit(1)
  }
})

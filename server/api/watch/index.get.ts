import { watchList } from '#server/services/watch'

export default apiHandler(() => watchList(db(), settings().PUBLIC_URL.replace(/\/$/, '')))

import { DomainError } from '#shared/utils/errors'

/** An address under /api that nothing answers: JSON, not a page. */
export default apiHandler(() => {
  throw new DomainError('not-found', 'There is nothing at this address.')
})

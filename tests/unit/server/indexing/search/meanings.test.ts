import { expect, it } from 'vitest'
import { likeness } from '#server/indexing/search/likeness'
import { meaningsIn, meantIn, topicsIn } from '#server/indexing/search/meanings'
import { tokenise } from '#server/indexing/words/tokenise'

const stems = (text: string) => tokenise(text).map(token => token.stem)
const meet = (question: string, said: string) => {
  const heard = meaningsIn(stems(said))
  return meantIn(stems(question)).some(({ meanings }) => meanings.some(meaning => heard.has(meaning)))
}

it.each([
  ['is it warped', 'we have to see if she has a twist'],
  ['how do you remove it', 'you just pull it and out it comes'],
  ['the gap beside it', 'there is daylight down there'],
])('plain words meet others of the same meaning: “%s”, “%s”', (question, said) => expect(meet(question, said)).toBe(true))

it('words that mean something else do not meet', () => expect(meet('is it warped', 'a cup of tea')).toBe(false))

it('the longest phrase is read, once', () => {
  const meant = meantIn(stems('the pot life, again the pot life'))
  expect(meant.map(one => one.stems.join(' ')).filter(phrase => phrase.includes('pot'))).toEqual([stems('pot life').join(' ')])
})

it('topics come with the weight of their most telling word', () => {
  expect([...topicsIn(stems('rivets and roves')).values()]).toContain(2)
  expect(topicsIn(stems('good morning')).size).toBe(0)
})

it('letters tell words that were formed or heard otherwise, and no others', () => {
  expect(likeness('chine', 'chine')).toBe(1)
  expect(likeness('symmetr', 'symmetri')).toBeGreaterThan(0.6)
  expect(likeness('shine', 'chine')).toBeGreaterThan(0.5)
  expect(likeness('glue', 'plank')).toBe(0)
})

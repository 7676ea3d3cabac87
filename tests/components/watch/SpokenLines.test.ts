import { mount } from '@vue/test-utils'
import { afterEach, beforeEach, expect, it, vi } from 'vitest'
import { nextTick } from 'vue'
import SpokenLines from '../../../app/components/watch/SpokenLines.vue'

const lines = Array.from({ length: 40 }, (_, i) => ({ startMs: i * 4000, endMs: i * 4000 + 4000, text: `line ${i}` }))

// happy-dom lays nothing out: rows of 30 px in a list of 300.
beforeEach(() => {
  vi.spyOn(HTMLElement.prototype, 'offsetTop', 'get').mockImplementation(function (this: HTMLElement) {
    return this.tagName === 'LI' ? [...this.parentElement!.children].indexOf(this) * 30 : 0
  })
  vi.spyOn(HTMLElement.prototype, 'offsetHeight', 'get').mockReturnValue(30)
  vi.spyOn(HTMLElement.prototype, 'clientHeight', 'get').mockReturnValue(300)
})
afterEach(() => vi.restoreAllMocks())

const show = (atMs: number) => mount(SpokenLines, { props: { lines, atMs, link: '/watch/burdock/moments/clip' }, global: { stubs: { NuxtLink: { template: '<a><slot /></a>' } } }, attachTo: document.body })

it('stands at the words of the moment from the first, and follows them', async () => {
  const wrapper = show(80_000)
  const list = wrapper.get('ol').element
  expect(list.scrollTop).toBe(20 * 30 - 90)
  expect(wrapper.get('[aria-current=true]').text()).toContain('line 20')
  await wrapper.setProps({ atMs: 120_500 })
  await nextTick()
  expect(list.scrollTop).toBe(30 * 30 - 90)
})

it('stays where somebody reads in it', async () => {
  const wrapper = show(0)
  wrapper.get('ol').element.focus()
  await wrapper.setProps({ atMs: 120_500 })
  await nextTick()
  expect(wrapper.get('ol').element.scrollTop).toBe(0)
})

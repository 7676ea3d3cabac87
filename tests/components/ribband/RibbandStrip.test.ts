import { mount } from '@vue/test-utils'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { nextTick } from 'vue'
import RibbandStrip from '../../../app/components/ribband/RibbandStrip.vue'
import { chapters, clips, cues, steps } from './session'

// happy-dom lays nothing out: the strip is told its width, and draws on no canvas.
beforeEach(() => {
  vi.spyOn(HTMLElement.prototype, 'offsetWidth', 'get').mockReturnValue(1000)
  vi.stubGlobal('ResizeObserver', class { observe() {} unobserve() {} disconnect() {} })
  vi.spyOn(HTMLCanvasElement.prototype, 'getContext').mockReturnValue(null)
})
afterEach(() => {
  vi.restoreAllMocks()
  vi.unstubAllGlobals()
  document.body.innerHTML = ''
})

async function strip(props: Record<string, unknown> = {}) {
  const wrapper = mount(RibbandStrip, { props: { clips, chapters, steps, cues, atMs: 22_000, ...props }, attachTo: document.body })
  await nextTick()
  await nextTick()
  return wrapper
}
const option = (wrapper: Awaited<ReturnType<typeof strip>>, id: string) => wrapper.get(`[data-chapter-id=${id}]`)

describe('chapters on the strip', () => {
  it('are named for the ear and counted', async () => {
    const options = (await strip()).findAll('[role=option]')
    expect(options.map(one => one.attributes('aria-label'))).toEqual([
      'Step 3, Cut the transom: cut, inked, 0:05 to 0:20',
      'Step 7, Glue the transom: glue, pencilled, 80 % sure, 0:20 to 0:50',
      'Step 7, Glue the transom: clean up, inked, 1:01:00 to 1:01:30',
    ])
    expect(options.map(one => [one.attributes('aria-posinset'), one.attributes('aria-setsize')])).toEqual([['1', '3'], ['2', '3'], ['3', '3']])
  })

  it('have one tab stop that roves with the arrows', async () => {
    const wrapper = await strip()
    const stops = () => wrapper.findAll('[role=option][tabindex="0"]').map(one => one.attributes('data-chapter-id'))
    expect(stops()).toEqual(['a'])
    await option(wrapper, 'a').trigger('keydown', { key: 'ArrowRight' })
    await nextTick()
    expect(stops()).toEqual(['b'])
    expect(document.activeElement?.getAttribute('data-chapter-id')).toBe('b')
    await option(wrapper, 'b').trigger('keydown', { key: 'End' })
    await nextTick()
    expect(document.activeElement?.getAttribute('data-chapter-id')).toBe('c')
  })

  it('are selected by Enter and by a screen reader’s click; Enter on the selected one is left to the page', async () => {
    const wrapper = await strip({ selectedChapterId: 'b' })
    expect(option(wrapper, 'b').attributes('aria-selected')).toBe('true')
    await option(wrapper, 'a').trigger('keydown', { key: 'Enter' })
    await option(wrapper, 'c').trigger('click', { detail: 0 })
    expect(wrapper.emitted('select-chapter')).toEqual([['a'], ['c']])
    const onPage = vi.fn()
    document.body.addEventListener('keydown', onPage, { once: true })
    await option(wrapper, 'b').trigger('keydown', { key: 'Enter' })
    expect(onPage).toHaveBeenCalledOnce()
    expect(wrapper.emitted('select-chapter')).toHaveLength(2)
  })
})

describe('the playhead', () => {
  it('is a slider that says clock and chapter', async () => {
    const head = (await strip()).get('[aria-label=Playhead]')
    expect(head.attributes()).toMatchObject({ 'role': 'slider', 'aria-valuemin': '0', 'aria-valuemax': '3720000', 'aria-valuenow': '22000', 'aria-valuetext': '0:22.0, step 7, Glue · Glue the transom' })
  })

  it('goes by a second, a frame, ten seconds, and to the ends', async () => {
    const wrapper = await strip()
    const head = wrapper.get('[aria-label=Playhead]')
    for (const key of ['ArrowRight', 'ArrowLeft', 'ArrowUp', 'ArrowDown', 'PageUp', 'Home', 'End']) await head.trigger('keydown', { key })
    expect(wrapper.emitted('seek')).toEqual([[23_000, 'clip0'], [21_000, 'clip0'], [22_040, 'clip0'], [21_960, 'clip0'], [32_000, 'clip0'], [0, 'clip0'], [3_719_999, 'clip1']])
  })

  it('never stops between clips', async () => {
    const wrapper = await strip({ atMs: 59_500 })
    await wrapper.get('[aria-label=Playhead]').trigger('keydown', { key: 'ArrowRight' })
    expect(wrapper.emitted('seek')).toEqual([[59_999, 'clip0']])
  })

  it('shows the words at its place', async () => {
    expect((await strip()).text()).toContain('mix one small batch')
  })
})

describe('edges', () => {
  const startOfB = '[aria-label="Start of step 7, Glue the transom"]'
  it('of the selected chapter are sliders, and the neighbour that meets one moves along', async () => {
    const wrapper = await strip({ selectedChapterId: 'b' })
    const start = wrapper.get(startOfB)
    expect(start.attributes()).toMatchObject({ 'aria-valuetext': '0:20.0', 'aria-valuemin': '5200', 'aria-valuemax': '49800' })
    await start.trigger('keydown', { key: 'PageDown' })
    expect(option(wrapper, 'a').attributes('aria-label')).toContain('0:05 to 0:19')
    expect(option(wrapper, 'b').attributes('aria-label')).toContain('0:19 to 0:50')
    await start.trigger('keydown', { key: 'Home' })
    expect(option(wrapper, 'a').attributes('aria-label')).toContain('0:05 to 0:05')
    expect(wrapper.emitted('move-edge')!.map(([move]) => move)).toEqual([
      { chapterId: 'b', edge: 'start', clipMs: 19_000, done: true, snapped: null },
      { chapterId: 'b', edge: 'start', clipMs: 5200, done: true, snapped: null },
    ])
  })

  it('stop at a neighbour that may not be changed, and are not there on one that may not', async () => {
    const wrapper = await strip({ selectedChapterId: 'b', mayChange: (chapter: { id: string }) => chapter.id !== 'a' })
    await wrapper.get(startOfB).trigger('keydown', { key: 'ArrowLeft' })
    expect(wrapper.emitted('move-edge')![0]).toMatchObject([{ clipMs: 20_000 }])
    await wrapper.setProps({ selectedChapterId: 'a' })
    expect(wrapper.findAll('[data-grip=start], [data-grip=end]')).toHaveLength(0)
  })

  it('of the selection move its in and out points within the clip', async () => {
    const wrapper = await strip({ selection: { inMs: 10_000, outMs: 59_980 } })
    await wrapper.get('[aria-label="In point"]').trigger('keydown', { key: 'ArrowRight' })
    await wrapper.get('[aria-label="Out point"]').trigger('keydown', { key: 'ArrowRight' })
    expect(wrapper.emitted('select-range')).toEqual([[{ clipId: 'clip0', startMs: 10_100, endMs: 59_980 }], [{ clipId: 'clip0', startMs: 10_000, endMs: 60_000 }]])
  })

  it('are not there for those who only watch', async () => {
    const wrapper = await strip({ selectedChapterId: 'b', selection: { inMs: 0, outMs: 5000 }, readOnly: true })
    expect(wrapper.findAll('[role=slider]')).toHaveLength(1)
  })
})

describe('the wheel', () => {
  const WHOLE = '0:00 to 1:02:00 in sight'
  async function wheelOn(wrapper: Awaited<ReturnType<typeof strip>>, turn: WheelEventInit, at = 10_000) {
    const bar = wrapper.get('[role=scrollbar]')
    const event = new WheelEvent('wheel', { bubbles: true, cancelable: true, ...turn })
    // happy-dom's wheel knows neither place nor keys.
    const known = { timeStamp: at, clientX: 500, clientY: 50, ctrlKey: turn.ctrlKey ?? false, shiftKey: turn.shiftKey ?? false, metaKey: false }
    for (const [name, value] of Object.entries(known)) Object.defineProperty(event, name, { value })
    wrapper.get(`#${CSS.escape(bar.attributes('aria-controls')!)}`).element.dispatchEvent(event)
    await nextTick()
    return { taken: event.defaultPrevented, sight: bar.attributes('aria-valuetext')! }
  }

  it('zooms, and is the page’s again once there is nothing left to zoom', async () => {
    const wrapper = await strip()
    expect(await wheelOn(wrapper, { deltaY: 100 }, 1000)).toEqual({ taken: false, sight: WHOLE })
    const near = await wheelOn(wrapper, { deltaY: -100 })
    expect(near.taken).toBe(true)
    expect(near.sight).not.toBe(WHOLE)
    expect(await wheelOn(wrapper, { deltaY: 400 })).toEqual({ taken: true, sight: WHOLE })
    expect((await wheelOn(wrapper, { deltaY: 100 })).taken).toBe(false)
    expect((await wheelOn(wrapper, { deltaY: 100, ctrlKey: true })).taken).toBe(true)
  })

  it('moves along when it is turned sideways or Shift is held', async () => {
    const wrapper = await strip()
    const near = await wheelOn(wrapper, { deltaY: -100 })
    const along = await wheelOn(wrapper, { deltaX: 50, deltaY: 3 })
    expect(along.sight).not.toBe(near.sight)
    expect(await wheelOn(wrapper, { deltaY: -50, shiftKey: true })).toEqual({ taken: true, sight: near.sight })
  })

  it('is not taken from a page that is being scrolled', async () => {
    const wrapper = await strip()
    const onPage = new WheelEvent('wheel', { bubbles: true, deltaY: 100 })
    Object.defineProperty(onPage, 'timeStamp', { value: 5000 })
    document.body.dispatchEvent(onPage)
    expect(await wheelOn(wrapper, { deltaY: -100 }, 5100)).toEqual({ taken: false, sight: WHOLE })
    expect((await wheelOn(wrapper, { deltaY: -100 }, 6000)).taken).toBe(true)
  })
})

describe('the part in sight', () => {
  it('is a scrollbar that says its times; keys zoom and move it', async () => {
    const wrapper = await strip()
    const bar = wrapper.get('[role=scrollbar]')
    expect(bar.attributes('aria-valuetext')).toBe('0:00 to 1:02:00 in sight')
    expect(wrapper.find(`#${CSS.escape(bar.attributes('aria-controls')!)}`).exists()).toBe(true)
    expect(wrapper.get('[aria-label="Zoom out"]').attributes()).toHaveProperty('disabled')
    await bar.trigger('keydown', { key: '+' })
    expect(bar.attributes('aria-valuetext')).not.toBe('0:00 to 1:02:00 in sight')
    const before = bar.attributes('aria-valuetext')
    await bar.trigger('keydown', { key: 'ArrowRight', shiftKey: true })
    expect(bar.attributes('aria-valuetext')).not.toBe(before)
    await bar.trigger('keydown', { key: '0' })
    expect(bar.attributes('aria-valuetext')).toBe('0:00 to 1:02:00 in sight')
  })
})

it('says so when there is no footage yet', async () => {
  const wrapper = mount(RibbandStrip, { props: { clips: [], chapters: [], steps, cues: [], atMs: 0 } })
  await nextTick()
  expect(wrapper.text()).toContain('No footage on the ribband yet.')
  expect(wrapper.find('[role=slider]').exists()).toBe(false)
})

import { mount } from '@vue/test-utils'
import { expect, it, vi } from 'vitest'
import type { StepView } from '#shared/types/plan'
import type { ChapterView } from '#shared/types/session'
import ChapterReview from '../../../app/components/chapter/ChapterReview.vue'

const step = (id: string, number: number, title: string): StepView => ({ id, number, position: number, stage: '', title, description: '', materials: [], partIds: [], status: 'to-do', plannedMinutes: null, spentMinutes: null, archived: false })
const steps = [step('7', 7, 'Glue the frames'), step('9', 9, 'Stand the frames')]
const chapter: ChapterView = {
  id: 'a', clipId: 'c', startMs: 0, endMs: 9000, stepId: '7', operation: 'glue', partIds: [], inking: 'pencilled', confidence: 0.64, proposed: true, note: '', version: 1, inkedBy: null, updatedBy: null,
  evidence: [{ atMs: 1200, words: 'epoxy' }, { atMs: 3400, words: 'middle frame' }],
  alternatives: { steps: [{ stepId: '9', confidence: 0.22 }, { stepId: null, confidence: 0.001 }], operations: [{ operation: 'fasten', confidence: 0.2 }] },
}

function show() {
  const tagging = { enter: vi.fn(), takeStep: vi.fn(), takeOperation: vi.fn() }
  const wrapper = mount(ChapterReview, {
    props: { chapter, tagging: tagging as never, steps },
    global: { stubs: { UiButton: { template: '<button><slot /></button>' }, StepBalloon: { props: ['number'], template: '<i>{{ number }}</i>' }, OperationMark: { props: ['operation'], template: '<i>{{ operation }}</i>' } } },
  })
  return { wrapper, tagging }
}

it('says what, how sure and why, in words and per cent', () => {
  const { wrapper } = show()
  expect(wrapper.text()).toContain('Glue the frames')
  expect(wrapper.text()).toContain('more likely than not, 64 %')
  expect(wrapper.text()).toContain('epoxy')
})

it('offers the next likeliest with their names and shares, and takes the one that is pressed', async () => {
  const { wrapper, tagging } = show()
  expect(wrapper.get('[data-other=step-1]').text()).toMatch(/Stand the frames.*22 %/)
  expect(wrapper.get('[data-other=step-2]').text()).toMatch(/No step.*< 1 %/)
  await wrapper.get('[data-other=step-2]').trigger('click')
  expect(tagging.takeStep).toHaveBeenCalledWith(1)
  await wrapper.get('[data-other=operation-1]').trigger('click')
  expect(tagging.takeOperation).toHaveBeenCalledWith(0)
  await wrapper.get('[data-ink]').trigger('click')
  expect(tagging.enter).toHaveBeenCalledOnce()
})

it('goes to the word that decided', async () => {
  const { wrapper } = show()
  await wrapper.findAll('button').find(button => button.text() === 'middle frame')!.trigger('click')
  expect(wrapper.emitted('seek')).toEqual([[3400]])
})

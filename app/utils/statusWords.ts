import type { StepStatus, Visibility } from '#shared/types/trade'

export const STATUS_WORDS: Record<StepStatus, string> = { 'to-do': 'To do', 'under-way': 'Under way', 'done': 'Done' }

export const VISIBILITY_WORDS: Record<Visibility, { label: string, means: string }> = {
  private: { label: 'Private', means: 'Only you and the people you let in can see anything of it.' },
  unlisted: { label: 'Unlisted', means: 'Anyone who has the link can watch what is published. It is not listed or found by search.' },
  public: { label: 'Public', means: 'Anyone can find it, search it and watch what is published.' },
}

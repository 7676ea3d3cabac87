import type { StepStatus } from './trade'

/** GET /api/builds/:build/plan */
export interface PlanView { steps: StepView[], parts: PartView[] }

export interface StepView {
  id: string
  number: number
  position: number
  stage: string
  title: string
  description: string
  materials: string[]
  partIds: string[]
  status: StepStatus
  plannedMinutes: number | null
  spentMinutes: number | null
  archived: boolean
}

export interface PartView {
  id: string
  position: number
  name: string
  aliases: string[]
  material: string
  thicknessMm: number | null
  quantity: number | null
  archived: boolean
}

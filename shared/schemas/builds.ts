import { z } from 'zod'
import { UNITS, VISIBILITIES } from '../types/trade'
import { filledLine, line, prose } from './text'

const fields = {
  name: filledLine('The name', 120, 'Give the build a name'),
  /** What is being built, in the builder's words. */
  boat: line('The boat', 160),
  about: prose('The description', 4000),
  units: z.enum(UNITS, 'Choose inches or millimetres'),
  visibility: z.enum(VISIBILITIES, 'Choose who may watch'),
}

export const newBuildSchema = z.object({
  name: fields.name,
  boat: fields.boat.default(''),
  about: fields.about.default(''),
  units: fields.units.default('inch'),
  visibility: fields.visibility.default('private'),
})

export const changeBuildSchema = z.object(fields).partial()

/** Typed by hand, so that a build is never deleted by a slip. */
export const deleteBuildSchema = z.object({ name: z.string('Type the build\'s name to delete it') })

export type NewBuild = z.output<typeof newBuildSchema>
export type ChangeBuild = z.output<typeof changeBuildSchema>

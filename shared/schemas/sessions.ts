import { z } from 'zod'

const day = z.iso.date({ error: 'Enter the day as year-month-day, such as 2026-09-05' })
const fields = {
  date: day,
  title: z.string().trim().max(120, 'Keep the title under 120 characters'),
  place: z.string().trim().max(120, 'Keep the place under 120 characters'),
  /** Kept in °C whatever was typed. */
  temperatureC: z.number({ error: 'The temperature is not a number' }).min(-60, 'The temperature is below −60 °C (−76 °F)').max(70, 'The temperature is above 70 °C (158 °F)').nullable(),
  humidityPercent: z.number({ error: 'The humidity is not a number' }).int('Give the humidity as a whole number').min(0, 'Humidity is between 0 and 100 %').max(100, 'Humidity is between 0 and 100 %').nullable(),
  notes: z.string().trim().max(20_000, 'Keep the notes under 20,000 characters'),
  /** Steps worked on that day. */
  stepIds: z.array(z.uuid()).max(500, 'Too many steps are ticked'),
}

export const newSessionSchema = z.object({
  ...fields,
  title: fields.title.default(''),
  place: fields.place.default(''),
  temperatureC: fields.temperatureC.default(null),
  humidityPercent: fields.humidityPercent.default(null),
  notes: fields.notes.default(''),
  stepIds: fields.stepIds.default([]),
})
export type NewSession = z.infer<typeof newSessionSchema>

/** What is left out stays as it is. */
export const sessionChangesSchema = z.object(fields).partial()
export type SessionChanges = z.infer<typeof sessionChangesSchema>

import { defineEntity, p, type InferEntity } from '@mikro-orm/core'

/** Facts of the school that are not rows of their own: its name, zone, the demo's clock. */
export const SchoolSetting = defineEntity({
  name: 'SchoolSetting',
  properties: {
    name: p.string().length(60).primary(),
    value: p.json<unknown>(),
  },
})
export type SchoolSetting = InferEntity<typeof SchoolSetting>

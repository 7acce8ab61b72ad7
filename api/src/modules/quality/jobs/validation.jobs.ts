import { z } from 'zod'
import { defineJob } from '../../../platform/index.js'

export const renderValidation = defineJob({
  name: 'validation.render',
  data: z.object({ id: z.string() }),
  expireSeconds: 180,
})

import { closeImageChild } from '../services/image-child'

export default defineNitroPlugin((nitro) => {
  nitro.hooks.hook('close', closeImageChild)
})

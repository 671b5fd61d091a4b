import { ComputeError } from '#shared/errors'
import { receiveShared } from '../utils/receive-shared'

/**
 * Where the system's share sheet hands pictures over (`share_target` in public/manifest.webmanifest). The system itself
 * opens this address, which a browser marks `Sec-Fetch-Site: none`; no page can send that. Whoever came another way is
 * refused, and even so nothing enters a studio before its person has said yes on a page of ours.
 */
export default defineEventHandler(async (event) => {
  try {
    const site = getHeader(event, 'sec-fetch-site')
    if (site !== 'none' && site !== 'same-origin') throw new ComputeError('foreign_origin', 'Pictures are taken here from this device’s share sheet only. Open Emulside itself and choose them there.')
    return await sendRedirect(event, await receiveShared(event), 303)
  }
  catch (error) {
    return answerError(event, error)
  }
})

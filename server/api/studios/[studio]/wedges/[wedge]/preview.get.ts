import { wedgeEndpoints } from '#shared/schemas/wedges'
import { wedgePreviewOf } from '../../../../../services/wedge-films'
import { requireWedgeParts } from '../../../../../services/wedge-parts'

export default defineRoute(wedgeEndpoints.wedgePreview, async ({ event, studio, query, idParam }) => {
  const picture = await wedgePreviewOf(await requireWedgeParts(studio.id, idParam('wedge')), query.width)
  await sendStoredFile(event, { ...picture, contentType: 'image/png', cacheControl: privateAskAgain })
})

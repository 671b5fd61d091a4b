import { negativeEndpoints } from '#shared/schemas/negatives'
import { forecastOf } from '../../../../../services/forecasts'
import { requireParts } from '../../../../../services/negative-parts'

export default defineRoute(negativeEndpoints.negativeForecast, async ({ event, studio, query, idParam }) => {
  const picture = await forecastOf(await requireParts(studio, idParam('negative')), query)
  await sendStoredFile(event, { ...picture, contentType: 'image/png', cacheControl: privateAskAgain })
})

import { contract } from '#build/client-contract'
import type { Negative } from '#shared/schemas/negatives'
import { addressOf } from '~/composables/useApi'
import type { TriptychState } from '~/utils/triptych'

/** The server's small pictures of a negative's three states; the revision keeps an older one from being shown again. */
export function negativePictures(studio: string, negative: Pick<Negative, 'id' | 'revision'>, widthPixels = 320): Record<TriptychState, string> {
  const address = (state: TriptychState) =>
    `${addressOf(contract.negativeForecast, { studio, negative: negative.id }, { width: widthPixels, state })}#${negative.revision}`
  return { photo: address('photo'), film: address('film'), print: address('print') }
}

import type { IconName } from '~/components/ui/icon-paths'
import type { Cause } from '#shared/schemas/wedges'

/** A sign for what is to be done; the words beside it say the same. */
export const causeIcons: Record<Cause['code'], IconName> = {
  'expose-longer': 'timer', 'expose-less': 'timer', 'more-ink': 'inkjet', 'less-ink': 'inkjet',
  'wash': 'sink', 'press-harder': 'hand', 'rotate-frame': 'turn', 'wrong-side-up': 'mirror',
}

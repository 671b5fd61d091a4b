import type { Photo } from '#shared/schemas/photos'
import { straightenedFrame } from '#shared/sheet/crop'
import { millimetresPerInch } from '#shared/sheet/sizes'
import type { useNegativeEditor } from '~/composables/useNegativeEditor'
import type { usePreview } from '~/composables/usePreview'
import type { PanelName } from '~/utils/panels'
import type { TriptychState } from '~/utils/triptych'
import { aimNames } from '~/utils/words'

interface Subject { editor: ReturnType<typeof useNegativeEditor>, photo: Readonly<Ref<Photo | null>>, preview: ReturnType<typeof usePreview>, benchName: Readonly<Ref<string>> }

/** What the editor says about a negative, in words and figures. */
export function useNegativeWords({ editor: { stored, draft }, photo, preview, benchName }: Subject) {
  const { lengthUnit } = usePreferences()
  const size = computed(() => draft.value ? showSize(draft.value.size, lengthUnit.value) : '')
  const l = (value: number) => formatDecimal(value, 0)

  const captions = computed(() => {
    const summary = preview.summary.value
    const reading = preview.reading.value
    const about: Record<TriptychState, string> = {
      photo: summary ? `as adjusted, L* ${l(summary.photoRange[0])} to ${l(summary.photoRange[1])}` : 'as adjusted',
      film: `${draft.value?.mirror ? 'mirrored' : 'not mirrored'}, ${size.value}`,
      print: summary ? `forecast, L* ${l(summary.printRange[0])} to ${l(summary.printRange[1])}` : 'forecast',
    }
    const readings = reading && {
      photo: `here L* ${l(reading.lightness)}`,
      film: `here ink ${formatPercent(reading.level, 0)}`,
      print: `here L* ${l(reading.printLightness)}, D ${reading.printDensity.toFixed(2)}`,
    }
    return { about, readings }
  })

  /** How fine the photo itself is at this size, whatever the film's own pixels. */
  const sizeNote = computed(() => {
    if (!stored.value || !photo.value) return ''
    const frame = straightenedFrame(photo.value, stored.value)
    const perInch = Math.floor(millimetresPerInch * Math.max(stored.value.crop.width * frame.width / stored.value.size.widthMm, stored.value.crop.height * frame.height / stored.value.size.heightMm))
    return `The photo has ${perInch} pixels an inch for it. The film measures ${showSize(stored.value.film, lengthUnit.value)}.`
  })

  const rowValues = computed<Record<PanelName, string>>(() => {
    const settings = draft.value!
    const { mix, midtone, contrast, blackPoint, whitePoint } = settings.adjustments
    const tones = [midtone && `middle ${formatSigned(midtone * 100)}`, contrast && `contrast ${formatSigned(contrast * 100)}`, (blackPoint || whitePoint < 1) && 'own ends'].filter(Boolean)
    return {
      tones: tones.join(', ') || 'as they are',
      mix: mix.red === 1 && mix.green === 1 && mix.blue === 1 ? 'as the eye' : 'own mix',
      crop: settings.fit === 'contain' ? 'whole photo' : 'fills the print',
      size: size.value,
      film: `${settings.pixelsPerInch} ppi, margin ${formatDecimal(settings.margin.mm, 1)} mm`,
      bench: benchName.value,
      aim: aimNames[settings.aim].toLowerCase(),
    }
  })

  const filmLabel = computed(() => stored.value && draft.value ? `${draft.value.name} · ${benchName.value} · curve ${stored.value.curve.version} · ${size.value} · ${draft.value.pixelsPerInch} ppi` : '')

  return { captions, sizeNote, rowValues, filmLabel }
}

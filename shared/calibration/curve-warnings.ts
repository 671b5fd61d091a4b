import type { ReadingChannel } from '../schemas/benches'
import type { Warning } from '../schemas/curves'
import { responsePoints } from '../tone/response'
import type { CurveReading } from './curve-fit'

/** L*: nearer than this, two places of a print are alike (common practice, no source). */
const alike = 1
/** L* by which a stain shows beside uncoated paper (common practice, no source). */
const stain = 2
/** A step of 8 bits that moves the print by more than this, L*, shows as an edge in a smooth sky (common practice, no source). */
const greatestStep = 0.8

export interface WarnedCurve { readings: readonly CurveReading[], channel: ReadingChannel, response: readonly number[] }

/** What a person should know of a fitted curve before trusting a day's paper to it. */
export function curveWarnings(curve: WarnedCurve): Warning[] {
  return [phoneWarning(curve), pathWarning(curve), ...(curve.channel === 'lightness' ? [blackWarning(curve), whiteWarning(curve), steepWarning(curve)] : [])].filter(w => w !== null)
}

function phoneWarning({ readings }: WarnedCurve): Warning | null {
  const phones = readings.filter(r => r.quality === 'phone').length
  if (phones === 0) return null
  const pooled = phones < readings.length ? ' It is pooled here with others: a curve from the scans alone is the one to trust.' : ''
  return { code: 'phone_reading', message: `${phones === 1 ? 'A phone picture' : `${phones} phone pictures`} went into this curve. Phones lighten and darken parts of a picture by themselves; scan the print to be sure.${pooled}` }
}

function pathWarning({ readings }: WarnedCurve): Warning | null {
  if (!readings.some(r => r.isOtherPath)) return null
  return { code: 'other_path', message: 'A wedge of this curve was printed by another path or in another ink than the bench has now. The curve holds for negatives printed the way the wedge was.' }
}

/** Bare coated paper beside the film had all the light there is. */
function blackWarning({ readings, response }: WarnedCurve): Warning | null {
  const bare = meanOf(readings, 'bare')
  const short = bare === null ? 0 : response[0]! - bare
  if (short <= alike) return null
  return { code: 'clear_film_not_black', message: `Paper outside the film printed ${short.toFixed(1)} L* darker than clear film: the print has not its full black. Expose longer.` }
}

/** Under foil there was no light at all; without foil, uncoated paper is the nearest thing. */
function whiteWarning({ readings, response }: WarnedCurve): Warning | null {
  const [white, foil, uncoated] = [response[responsePoints - 1]!, meanOf(readings, 'foil'), meanOf(readings, 'uncoated')]
  if (foil !== null && foil - white > alike)
    return { code: 'full_ink_not_white', message: `Full ink printed ${(foil - white).toFixed(1)} L* darker than the place under foil: ink lets UV through. Use more ink or a denser mix.` }
  if (uncoated === null || uncoated - white <= stain) return null
  const shown = (uncoated - white).toFixed(1)
  return foil === null
    ? { code: 'full_ink_not_white', message: `Full ink printed ${shown} L* darker than uncoated paper. Ink lets UV through, or the print is stained: put a piece of foil on the next wedge to tell.` }
    : { code: 'stained', message: `Full ink and the place under foil are both ${shown} L* darker than uncoated paper: a stain, or the wash was short. Leave the ink alone.` }
}

function meanOf(readings: readonly CurveReading[], place: 'bare' | 'foil' | 'uncoated'): number | null {
  const read = readings.map(r => r.places?.[place] ?? null).filter(v => v !== null)
  return read.length === 0 ? null : read.reduce((a, b) => a + b, 0) / read.length
}

/** The greatest change of the print over one 8-bit step of ink. */
function steepWarning({ response }: WarnedCurve): Warning | null {
  const step = Math.ceil((responsePoints - 1) / 255)
  let [most, at] = [0, 0]
  for (let i = 0; i + step < responsePoints; i++) {
    const change = (response[i + step]! - response[i]!) * (responsePoints - 1) / 255 / step
    if (change > most) [most, at] = [change, i]
  }
  if (most <= greatestStep) return null
  return { code: 'too_steep', message: `Near ${Math.round(100 * at / (responsePoints - 1))} % ink one step of 8 bits changes the print by ${most.toFixed(1)} L* (more than ${greatestStep} can show as an edge). Print from 16-bit files; where a file must have 8 bits it is dithered.` }
}

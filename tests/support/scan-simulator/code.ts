import QRCode from 'qrcode'
import { seededRandom } from '../../../shared/calibration/random'
import { identityFromBytes, identityLength } from '../../../shared/calibration/wedge/identity-code'

/** The modules of a wedge's code, as any QR library draws them (ISO/IEC 18004, version 1-H). */
export const codeModules = (code: string): Uint8Array => Uint8Array.from(QRCode.create([{ data: code, mode: 'alphanumeric' }], { errorCorrectionLevel: 'H', version: 1 }).modules.data)

/** A wedge's code by a seed. */
export function codeOfSeed(seed: number): string {
  const random = seededRandom(seed)
  return identityFromBytes(Uint8Array.from({ length: identityLength }, () => random.below(256)))
}

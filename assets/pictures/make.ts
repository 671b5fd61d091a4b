/**
 * Makes the first page's three pictures from one photograph, with the product's own tables:
 *   npx esbuild assets/pictures/make.ts --bundle --platform=node --format=esm --packages=external --outfile=/tmp/make.mjs
 *   node /tmp/make.mjs /usr/share/libjxl-testdata/external/wesaturate/500px/u76c0g_bliznaca_srgb8.png
 * (run from the project's folder; the photograph is CC0, from Debian's libjxl-testdata)
 */
import sharp from 'sharp'
import { starterResponse } from '../../shared/calibration/starter'
import { neutralAdjustments } from '../../shared/tone/adjustments'
import { buildForecastTable, buildLevelTable } from '../../shared/tone/levels'
import { lightnessFromLuminance } from '../../shared/tone/lightness'
import { buildPaletteTable, lightTableLightness } from '../../shared/tone/palettes'
import { srgbToLinear } from '../../shared/tone/srgb'

const side = 960
const settings = { adjustments: neutralAdjustments, aim: 'keep-middle-tones', response: starterResponse('cyanotype').response } as const
const tables = {
  photo: buildPaletteTable('photo', Float64Array.from({ length: 65536 }, (_, code) => code / 655.35)),
  film: buildPaletteTable('film', buildLevelTable(settings).map(lightTableLightness)),
  print: buildPaletteTable('cyanotype', buildForecastTable(settings)),
}

const raw = await sharp(process.argv[2]).resize(side, side).toColourspace('grey16').raw({ depth: 'ushort' }).toBuffer()
const tones = Uint16Array.from(new Uint16Array(raw.buffer, raw.byteOffset, side * side), grey => Math.round(655.35 * lightnessFromLuminance(srgbToLinear(grey / 65535))))

for (const [state, table] of Object.entries(tables)) {
  const pixels = Uint32Array.from(tones, (_, place) => table[tones[state === 'film' ? place - 2 * (place % side) + side - 1 : place]!]!)
  await sharp(Buffer.from(pixels.buffer), { raw: { width: side, height: side, channels: 4 } })
    .removeAlpha().jpeg({ quality: 78, mozjpeg: true }).toFile(`assets/pictures/blossom-${state}.jpg`)
}

import { writeFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { seededRandom } from '../../../shared/calibration/random'
import { printExposureStrip, simulatedBaseSeconds } from '../simulator/exposure-strip'
import { printQualities, type PrintQuality } from '../simulator/print'
import { drawSystem, type PrintSystem } from '../simulator/system'
import { printStepsInOrder } from '../simulator/wedge'

// Makes the measured values of the demo studio from the tests' simulated processes: `npx tsx tests/support/demo/make-values.ts`.
// The same seed gives the same values; the service reads the JSON and knows nothing of the simulator.

const seed = 20261201
const target = fileURLToPath(new URL('../../../server/cli/demo/values.json', import.meta.url))

/** A process whose exposure scale lies where such papers lie; `seconds` is its base exposure. */
const process = (offset: number, exposureScaleFrom: number, exposureScaleTo: number) => drawSystem(seededRandom(seed + offset), { exposureScaleFrom, exposureScaleTo })

/** The same paper exposed a little more or less than the base exposure, as from one print to the next. */
const exposedBy = (system: PrintSystem, exposureLog: number): PrintSystem =>
  ({ ...system, lightness: (level, change = { exposure: 0, coating: 0 }) => system.lightness(level, { ...change, exposure: change.exposure + exposureLog }) })

const rounded = (value: number, digits: number) => Number(value.toFixed(digits))

/** 31 steps as a spot instrument reads them. */
const wedge = (system: PrintSystem, offset: number, exposureLog: number, quality: PrintQuality) =>
  printStepsInOrder(exposedBy(system, exposureLog), 6, 6, 31, quality, seededRandom(seed + offset)).map(({ level, lightness }) => ({ level, value: rounded(lightness, 1) }))

const strip = (system: PrintSystem, offset: number, seconds: number, lampLog: number) =>
  printExposureStrip(system, { steps: 10, stepLog: 0.15, firstLog: -0.9 + lampLog }, printQualities.careful, seededRandom(seed + offset))
    .map(({ exposureSeconds, lightness }) => ({ exposureSeconds: rounded(exposureSeconds * seconds / simulatedBaseSeconds / 10 ** lampLog, 0), lightness: rounded(lightness, 1) }))

const cyanotype = process(1, 1.15, 1.35), vanDyke = process(2, 1.55, 1.8), kallitype = process(3, 1.5, 1.7)
const values = {
  origin: { script: 'tests/support/demo/make-values.ts', seed, truth: Object.fromEntries(Object.entries({ cyanotype, vanDyke, kallitype }).map(([name, system]) => [name, Array.from({ length: 11 }, (_, i) => rounded(system.lightness(i / 10), 2))])) },
  cyanotype: {
    rough: wedge(cyanotype, 11, 0.08, printQualities.rough),
    careful: [wedge(cyanotype, 12, 0.01, printQualities.careful), wedge(cyanotype, 13, -0.015, printQualities.careful)],
    strips: [strip(cyanotype, 14, 420, 0), strip(cyanotype, 15, 420, -0.06)],
  },
  vanDyke: { wedge: wedge(vanDyke, 21, 0, printQualities.typical), strip: strip(vanDyke, 22, 260, 0) },
  kallitype: { strip: strip(kallitype, 32, 180, 0) },
}
writeFileSync(target, `${JSON.stringify(values).replace(/\},\{/g, '},\n{')}\n`)

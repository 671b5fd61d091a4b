// Longer than most: all that the walk says, step by step, stands in one place so that its words stay of one kind.
import type { Bench, Process } from '#shared/schemas/benches'
import type { WalkStep } from '#shared/schemas/calibration'
import type { DrawingName } from '~/components/calibrate/drawings'

/** What to do with the hands, with the picture drawn for it. */
export interface Hand { drawing: DrawingName, title: string, text: string }
export interface StepWords { name: string, short: string, why: string, hands: Hand[], cautions: string[] }

/** Names under the nine cells; `short` stands there, `name` above the step. */
export const stepNames: Record<WalkStep, { name: string, short: string }> = {
  'path': { name: 'Path and settings', short: 'path' },
  'ink-load': { name: 'Ink load and drying', short: 'ink load' },
  'base-exposure': { name: 'Base exposure', short: 'base exposure' },
  'ink-trial': { name: 'Ink trial', short: 'ink trial' },
  'wedge': { name: 'Wedge on film', short: 'wedge on film' },
  'expose': { name: 'Expose, develop, dry', short: 'wedge print' },
  'read': { name: 'Read the print', short: 'read' },
  'curve': { name: 'Curve', short: 'curve' },
  'check': { name: 'A real picture as check', short: 'a real picture' },
}

export const filmDryingSeconds = 30 * 60
const day = 86_400
/** A day for prints that darken; an afternoon where they only have to be dry through. Common practice. */
export const printDryingSeconds: Record<Process, number> = {
  'cyanotype': day, 'van-dyke': day, 'salt': day, 'kallitype': day, 'platinum-palladium': day / 6, 'gum': day / 6, 'carbon': day / 6, 'other': day,
}

const developing: Record<Process, string> = {
  'cyanotype': 'Wash it in a tray of cool, gently moving water until no more yellow comes out. Do it the same way each time.',
  'van-dyke': 'Wash it, fix it in weak fixer and wash it again, with the times of your recipe.',
  'salt': 'Wash it, tone it if your recipe does, fix it and wash it again, with the times of your recipe.',
  'kallitype': 'Develop, clear, fix and wash it with the baths, times and temperature of your recipe.',
  'platinum-palladium': 'Pour the developer over it in one go, then clear and wash it as your recipe says. Keep the temperature.',
  'gum': 'Let it float face down in still water for the time of your recipe. No brush: it would take off tones.',
  'carbon': 'Squeegee it onto its support, let it sit, and develop it in warm water as your recipe says.',
  'other': 'Develop, clear and wash it as your recipe says, the same way each time.',
}

const usual = {
  lamp: 'UV harms eyes and skin. Look away from the open lamp, and switch it off or shield it before you open the frame.',
  wet: 'Wear gloves and eye protection with sensitizer and baths; keep them off skin, food and worktops. A splash in the eye: rinse at once, keep rinsing, and call the local emergency number.',
  first: 'The safety data sheets, the law where you are and your teacher’s word go first.',
  waste: 'Used baths go into labelled containers.',
}
const ofProcess: Partial<Record<Process, string>> = {
  'cyanotype': 'Never bring strong or concentrated acid together with ferricyanide. A dilute citric or vinegar bath for the print is normal practice.',
  'van-dyke': 'Silver salts burn eyes and stain what they touch.',
  'salt': 'Silver salts burn eyes and stain what they touch.',
  'kallitype': 'Silver salts burn eyes and stain what they touch.',
  'platinum-palladium': 'Platinum salts can cause allergies: no dust, no hot air on a coating that has dried to powder.',
}

const coat: Hand = { drawing: 'DrawCoat', title: 'Coat the paper', text: 'Coat as your recipe says, larger than the film on all sides, and leave one corner of the paper without coating. Let it dry in the dark.' }
const filmDown: Hand = { drawing: 'DrawFilmDown', title: 'Lay film on coating', text: 'The printed side of the film touches the coating. The writing then reads right through the glass. Close the frame so that it presses evenly.' }
const wet = (process: Process): string[] => [usual.lamp, usual.wet, ...(ofProcess[process] ? [ofProcess[process]] : []), usual.waste, usual.first]
const dry = (process: Process): Hand => printDryingSeconds[process] === day
  ? { drawing: 'DrawDarken', title: 'Let it dry and darken', text: process === 'cyanotype' ? 'The blue deepens for about a day. A short bath in very weak peroxide brings it out at once; then only let it dry.' : 'Prints like this darken while they dry. Read it after a day, always after the same time.' }
  : { drawing: 'DrawHang', title: 'Dry it through', text: 'Read it only when it is dry through, and always after the same time.' }

const filmDries: Hand = { drawing: 'DrawFilmDry', title: 'Let the film dry', text: 'Half an hour, printed side up, nothing on top. Damp film sticks to the coating and marks the print.' }

/** The words of each step for a bench of this process. */
export function walkWords({ process }: Pick<Bench, 'process'>): Record<WalkStep, StepWords> {
  const words: Record<WalkStep, Omit<StepWords, 'name' | 'short'>> = {
    'path': {
      why: 'The path is how a film file reaches the inkjet: program, resolution, media type, quality, colour handling, side of the film. A negative that takes another path than its wedge prints other tones.',
      hands: [
        { drawing: 'DrawFilmSide', title: 'Find the side to print on', text: 'Touch a corner of the film with a dry fingertip. The coated side clings a little: the ink goes there. Load the film so.' },
        { drawing: 'DrawPath', title: 'Set the inkjet, once', text: 'Colour adjustment off, size 100 %, no fitting to the page. Choose a media type and a quality, and keep to them.' },
      ], cautions: [],
    },
    'ink-load': {
      why: 'First see whether the film takes all the ink at all, and how long it stays wet. A film that beads or smears spoils every step after this one.',
      hands: [
        { drawing: 'DrawInkLoad', title: 'Print it, then wipe', text: 'Print the ink-load film. Look for beads and bands in the full squares. Then start the clock, and wipe each strip with a tissue when the minutes beside it are over.' },
        { ...filmDries, text: 'The first strip that no longer smears says how long films of this bench have to dry. If all of them smear, choose a media type that lays down less ink and print it again.' },
      ], cautions: [],
    },
    'base-exposure': {
      why: 'The base exposure is the shortest one that gives the paper’s full black through clear film. Longer only eats the shadows; shorter leaves them grey.',
      hands: [
        { ...coat, text: 'Print the strip’s guide on film, let it dry and cut it out along its marks. Coat a piece of paper a little larger than it, as your recipe says.' },
        filmDown,
        { drawing: 'DrawCardStrip', title: 'Cover window after window', text: 'Start the lamp with all windows open. Above each window stands a time: when it is over, push the card across that window. One card comes from the left in the upper row, one from the right in the lower.' },
        { drawing: 'DrawWash', title: 'Develop and wash', text: developing[process] },
        dry(process),
      ], cautions: wet(process),
    },
    'ink-trial': {
      why: 'Only if full ink lets too much UV through, or if the film takes too long to dry: the trial finds the ink mix that holds back just enough. Black ink is the usual start; most benches never need this.',
      hands: [
        { drawing: 'DrawInkTrial', title: 'Ramps of several mixes', text: 'Print the trial film, expose it at the base exposure and finish the print as usual. The best mix is the one that just reaches paper white, with the least ink.' },
        filmDown, dry(process),
      ], cautions: wet(process),
    },
    'wedge': {
      why: 'A wedge holds every amount of ink from none to full. Printed on your paper it tells what tone each of them gives.',
      hands: [
        { drawing: 'DrawFilmSide', title: 'Print it like a negative', text: 'Same path, same settings, 100 %. The file is mirrored already: change nothing. When it is dry, cut the wedge out along its marks.' },
        filmDries,
      ], cautions: [],
    },
    'expose': {
      why: 'This print is what the curve will be made of. Work as you do for a good print: the same water, the same times.',
      hands: [
        coat,
        { drawing: 'DrawFoil', title: 'Foil on its square', text: 'Cut a small piece of kitchen foil and lay it on the square marked foil. Leave a finger’s width of coating uncovered beside the film. Both help to tell a leak of light from a stain.' },
        filmDown,
        { drawing: 'DrawExpose', title: 'Expose at the base exposure', text: 'Let the lamp warm up, then give the base exposure. Pencil the print’s number into its box before it gets wet.' },
        { drawing: 'DrawWash', title: 'Develop and wash', text: developing[process] },
        dry(process),
      ], cautions: wet(process),
    },
    'read': {
      why: 'Now the print is measured, patch by patch, from a scan. A phone picture does for a first look; a scan is surer.',
      hands: [
        { drawing: 'DrawScan', title: 'Scan it flat', text: 'White paper under and round the print, 300 to 600 ppi, colour. Switch off everything automatic: exposure, sharpening, dust removal, colour restoring.' },
        { drawing: 'DrawPhone', title: 'Or take a picture', text: 'By a window, out of the sun, without flash. Hold the phone level, so that the whole wedge with its corner marks is in the picture and no shadow falls on it.' },
      ], cautions: [],
    },
    'curve': {
      why: 'The curve turns wanted tones into ink. It says first what your next print will do, and what one more wedge print would buy.',
      hands: [{ drawing: 'DrawCurve', title: 'Look before you use it', text: 'The points should scatter closely about the line. A bend of its own, or a step, is a thing to find out about before paper is spent.' }],
      cautions: [],
    },
    'check': {
      why: 'A picture tells what a wedge cannot: whether you like it. Print a real one, dry it, and hold it beside the forecast.',
      hands: [{ drawing: 'DrawCheck', title: 'Print one you know', text: 'Choose a photo with deep shadows and bright lights. If a tone is off all over the picture, a second wedge through the curve shows by how much.' }],
      cautions: [],
    },
  }
  return Object.fromEntries(Object.entries(words).map(([step, said]) => [step, { ...stepNames[step as WalkStep], ...said }])) as Record<WalkStep, StepWords>
}

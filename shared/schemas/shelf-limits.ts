/** What is bounded in the records of the shelf; the screens' fields take their ends from here. */
export const shelfLimits = {
  weightGramsPerM2: [5, 2000],
  coatingMillilitresPerM2: [1, 500],
  thicknessMicrometres: [10, 1000],
  /** a week */
  dryingMinutes: [0, 10_080],
  baseDensityUv: [0, 4],
  scannerPixelsPerInch: [72, 12_800],
  /** a correction of more than a tenth is a wrong setting */
  scaleFactor: [0.9, 1.1],
  peakNanometres: [200, 800],
  watts: [0.1, 100_000],
  distanceMm: [1, 5000],
  warmUpMinutes: [0, 120],
  burnedHours: [0, 1_000_000],
  lightness: [0, 100],
  colourAxis: [-128, 128],
  sizes: 20, lots: 50, parts: 8, substances: 12, paths: 12, resolutions: 8,
} as const

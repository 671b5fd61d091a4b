/** A rising curve from 0 to 1 with a shape ν > 0, on an axis where its steeper tail goes as e^(±z). */
export interface ExposureCurve {
  share: (z: number, shape: number) => number
  /** derivative by z */
  slope: (z: number, shape: number) => number
  /** the z of a share between 0 and 1, ends excluded */
  position: (share: number, shape: number) => number
}

/** Beyond this z a share is 0 or 1 to the last bit. */
const farthest = 60
const within = (z: number): number => Math.min(farthest, Math.max(-farthest, z))

/** Richards' growth curve, (1 + ν·e^(−z))^(−1/ν) (J. Experimental Botany 10(2):290–301, 1959): logistic at ν = 1, slow shoulder below, slow toe above. */
const richards: ExposureCurve = {
  share: (z, shape) => Math.exp(-Math.log1p(shape * Math.exp(-within(z))) / shape),
  slope: (z, shape) => {
    const rest = Math.exp(-within(z))
    return Math.exp(-Math.log1p(shape * rest) / shape) * rest / (1 + shape * rest)
  },
  position: (share, shape) => -Math.log(Math.expm1(-shape * Math.log(share)) / shape),
}

/**
 * The same curve turned by half a circle, 1 − (1 + ν·e^z)^(−1/ν). At ν → 0 it is 1 − e^(−H) with H = e^z: each grain or molecule is changed
 * by its own photon (first-order photochemical kinetics), with a shoulder more abrupt than any of Richards' curves.
 */
const turned: ExposureCurve = {
  share: (z, shape) => 1 - richards.share(-z, shape),
  slope: (z, shape) => richards.slope(-z, shape),
  position: (share, shape) => -richards.position(1 - share, shape),
}

export const exposureCurves = { richards, turned }

import { ComputeError } from '#shared/errors'
import { limits } from '#shared/schemas/limits'

/** Throws `film_too_large` with the limit and what would fit. */
export function requireFilmFits({ widthPixels, heightPixels }: { widthPixels: number, heightPixels: number }, pixelsPerInch: number): void {
  const pixels = widthPixels * heightPixels
  if (pixels <= limits.filmMaxPixels) return
  const fitting = Math.floor(pixelsPerInch * Math.sqrt(limits.filmMaxPixels / pixels))
  throw new ComputeError('film_too_large',
    `This film would have ${millions(pixels)} million pixels (${widthPixels} × ${heightPixels}); at most ${millions(limits.filmMaxPixels)} million can be made. ${fitting >= limits.pixelsPerInchMin ? `At this size ${fitting} pixels per inch fit.` : 'Make it smaller.'}`,
    [{ path: 'pixelsPerInch', message: `At most ${Math.max(fitting, limits.pixelsPerInchMin)} at this size.` }])
}

const millions = (pixels: number): string => (pixels / 1e6).toFixed(pixels < 1e9 ? 1 : 0).replace(/\.0$/, '')

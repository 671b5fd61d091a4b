import sharp from 'sharp'
import { expect, it } from 'vitest'
import { engineVersion } from '../../../server/image/version'

it('the engine’s version names the installed library: another one may give other bytes', () => {
  expect(engineVersion.split(' ').slice(1)).toEqual([`sharp-${sharp.versions.sharp}`, `libvips-${sharp.versions.vips}`])
})

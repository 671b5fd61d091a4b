import { dirname, join, resolve } from 'node:path'
import { fileURLToPath } from 'node:url'

/** The checkout's folder. */
export const root = resolve(dirname(fileURLToPath(import.meta.url)), '../..')
/** All that an installation keeps: cluster, files, passwords, dumps. */
export const dataFolder = resolve(root, process.env.DATA_DIR ?? '.data')
export const inData = (...parts) => join(dataFolder, ...parts)
/** Nitro's built web server. */
export const webProgram = join(root, '.output/server/index.mjs')
/** The built programs beside it. Not below .output/server: there they would meet Nitro's partial copies of packages. */
export const builtPrograms = join(root, '.output/programs')

import { addTemplate, addTypeTemplate, createResolver, defineNuxtModule } from 'nuxt/kit'
import { contract } from '../shared/schemas/contract'

/**
 * The browser needs each route's method and path and its types, but not the schemas and their validator (some 100 kB of script):
 * `#build/client-contract` holds just those, made from the contract.
 */
export default defineNuxtModule({
  meta: { name: 'client-contract' },
  setup(_options, nuxt) {
    const { resolve } = createResolver(import.meta.url)
    nuxt.options.watch.push(resolve('../shared/schemas'))
    const rows = Object.fromEntries(Object.entries(contract).map(([name, { method, path }]) => [name, { method, path }]))
    addTemplate({ filename: 'client-contract.mjs', write: true, getContents: () => `export const contract = ${JSON.stringify(rows, null, 2)}\n` })
    addTypeTemplate({
      filename: 'client-contract.d.ts',
      getContents: () => `export declare const contract: typeof import(${JSON.stringify(resolve('../shared/schemas/contract'))}).contract\n`,
    })
  },
})

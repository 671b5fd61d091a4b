import { existsSync, readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { describe, expect, it } from 'vitest'

// Rules of the house that a reader can't see at a glance. Their patterns are tried on made-up lines as well.

const root = fileURLToPath(new URL('../..', import.meta.url))
const folders = ['components', 'composables', 'layouts', 'middleware', 'modules', 'pages', 'plugins', 'server', 'shared', 'stores', 'utils']
  .filter(folder => existsSync(join(root, folder)))

function sources(folder: string): { path: string, imports: string[] }[] {
  const paths = readdirSync(join(root, folder), { recursive: true, encoding: 'utf8' }).filter(path => /\.(?:ts|mjs|vue)$/.test(path))
  return paths.map(path => ({ path: `${folder}/${path}`, imports: importsIn(readFileSync(join(root, folder, path), 'utf8')) }))
}

/** The modules that a source imports, statically, dynamically or by re-export; types count as well. */
function importsIn(text: string): string[] {
  return [...text.matchAll(/(?:\bfrom\s*|\bimport\s*\(?\s*|\brequire\(\s*)['"]([^'"]+)['"]/g)].map(match => match[1]!)
}

const all = folders.flatMap(sources)
const among = (names: RegExp) => (module: string) => names.test(module)

describe('imports are found', () => {
  it('in every form', () => {
    expect(importsIn('import a from "a"\nimport { b } from \'b\'\nexport * from "c"\nawait import(\'d\')\nimport "e"\nrequire("f")')).toEqual(['a', 'b', 'c', 'd', 'e', 'f'])
  })
  it('in a good many files', () => {
    expect(all.length).toBeGreaterThan(100)
    expect(all.flatMap(({ imports }) => imports).length).toBeGreaterThan(all.length)
  })
})

describe('the walls', () => {
  it('keep shared/ free of Vue, Nitro, Node, databases and sharp, and of everything outside it', () => {
    const allowed = /^(?:#shared\/|\.{1,2}\/|zod$|papaparse$)/
    const strangers = all.filter(({ path }) => path.startsWith('shared/')).flatMap(({ path, imports }) => imports.filter(module => !allowed.test(module) || module.includes('/server/')).map(module => `${path}: ${module}`))
    expect(strangers).toEqual([])
  })

  it('let only server/image import sharp', () => {
    expect(all.filter(({ path, imports }) => !path.startsWith('server/image/') && imports.some(among(/^sharp(?:\/|$)/))).map(({ path }) => path)).toEqual([])
    expect(all.some(({ path, imports }) => path.startsWith('server/image/') && imports.includes('sharp'))).toBe(true)
  })

  it('keep the picture child’s program out of web: routes, plugins and services reach it through its pool only', () => {
    const reach = new Map(all.filter(({ path }) => path.startsWith('server/')).map(({ path, imports }) => [path.replace(/\.\w+$/, ''), imports]))
    const seen = new Set<string>()
    const visit = (path: string, from: string[]): string[] => {
      if (seen.has(path)) return []
      seen.add(path)
      return (reach.get(path) ?? reach.get(`${path}/index`) ?? []).flatMap((module) => {
        if (module === 'sharp') return [[...from, path].join(' → ')]
        return module.startsWith('.') ? visit(join(path, '..', module), [...from, path]) : []
      })
    }
    const web = [...reach.keys()].filter(path => /^server\/(?:api|routes|plugins|middleware|utils|services)\//.test(path))
    expect(web.length).toBeGreaterThan(30)
    expect(web.flatMap(path => visit(path, []))).toEqual([])
  })

  it('let what runs before dependencies are there import Node’s own modules only, statically', () => {
    const early = all.filter(({ path }) => /^server\/cli\/.*\.mjs$/.test(path))
    expect(early.length).toBeGreaterThan(8)
    const strangers = early.flatMap(({ path }) => [...readFileSync(join(root, path), 'utf8').matchAll(/^import .*from '([^']+)'/gm)].map(match => match[1]!).filter(module => !/^(?:node:|\.\/[\w-]+\.mjs$)/.test(module)).map(module => `${path}: ${module}`))
    expect(strangers).toEqual([])
  })
})

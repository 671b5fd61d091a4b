import { mkdirSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import sharp from 'sharp'

// Renders the demo studio's photographs: `node tests/support/demo/make-photographs.mjs [name …]`, a minute or two each. Nothing is
// taken from anywhere; the same seed gives the same pixels. Longer than other files: a renderer and its six scenes.

const seed = 20261201
const folder = fileURLToPath(new URL('../../../server/cli/demo/photos', import.meta.url))

// ── chance and noise ──

function chance(start) {
  let a = start >>> 0
  return () => {
    a = a + 0x6D2B79F5 | 0
    let t = Math.imul(a ^ a >>> 15, 1 | a)
    t = t + Math.imul(t ^ t >>> 7, 61 | t) ^ t
    return ((t ^ t >>> 14) >>> 0) / 4294967296
  }
}
const clamp = (v, low = 0, high = 1) => v < low ? low : v > high ? high : v
const mix = (a, b, t) => a + (b - a) * t
const smooth = (from, to, v) => { const t = clamp((v - from) / (to - from)); return t * t * (3 - 2 * t) }
function hash(x, y, z) {
  let h = Math.imul(x, 374761393) + Math.imul(y, 668265263) + Math.imul(z, 2147483647) + seed | 0
  h = Math.imul(h ^ h >>> 13, 1274126177)
  return ((h ^ h >>> 16) >>> 0) / 4294967296
}
function noise(x, y, z = 0) {
  const i = Math.floor(x), j = Math.floor(y), k = Math.floor(z)
  const u = smooth(0, 1, x - i), v = smooth(0, 1, y - j), w = smooth(0, 1, z - k)
  const plane = (l) => mix(mix(hash(i, j, l), hash(i + 1, j, l), u), mix(hash(i, j + 1, l), hash(i + 1, j + 1, l), u), v)
  return mix(plane(k), plane(k + 1), w)
}
/** 0 … 1, with a mean of one half */
function fractal(x, y, z = 0, octaves = 5) {
  let sum = 0, weight = 0.5, whole = 0
  for (let o = 0; o < octaves; o++) {
    sum += weight * noise(x + 17.3 * o, y - 9.1 * o, z)
    whole += weight
    weight *= 0.5
    x *= 2.03
    y *= 2.03
    z *= 2.03
  }
  return sum / whole
}

// ── vectors ──

const add = (a, b, t = 1) => [a[0] + b[0] * t, a[1] + b[1] * t, a[2] + b[2] * t]
const dot = (a, b) => a[0] * b[0] + a[1] * b[1] + a[2] * b[2]
const unit = a => { const l = Math.hypot(a[0], a[1], a[2]); return [a[0] / l, a[1] / l, a[2] / l] }
const cross = (a, b) => [a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]]
const reflect = (d, n) => add(d, n, -2 * dot(d, n))

/** A camera with a lens: rays for picture places in −1 … 1, spread over its opening. */
function camera({ from, to, view, opening = 0, focus }) {
  const ahead = unit(add(to, from, -1)), right = unit(cross(ahead, [0, 1, 0])), up = cross(right, ahead)
  const distance = focus ?? Math.hypot(...add(to, from, -1))
  return (x, y, random) => {
    const r = opening * Math.sqrt(random()), a = 2 * Math.PI * random()
    const target = add(add(add(from, ahead, distance), right, x * view * distance), up, y * view * distance)
    const origin = add(add(from, right, r * Math.cos(a)), up, r * Math.sin(a))
    return { origin, direction: unit(add(target, origin, -1)) }
  }
}

// ── shapes by their distance ──

const tiny = 0.0012
function march(map, origin, direction, far) {
  for (let t = 0.02, i = 0; i < 160 && t < far; i++) {
    const d = map(origin[0] + direction[0] * t, origin[1] + direction[1] * t, origin[2] + direction[2] * t)
    if (d < tiny * t * 0.4) return t
    t += d
  }
  return undefined
}
function normalAt(map, [x, y, z], e = 0.0015) {
  return unit([map(x + e, y, z) - map(x - e, y, z), map(x, y + e, z) - map(x, y - e, z), map(x, y, z + e) - map(x, y, z - e)])
}
function lit(map, from, direction, softness, far = 8) {
  let least = 1
  for (let t = 0.02, i = 0; i < 48 && t < far; i++) {
    const d = map(from[0] + direction[0] * t, from[1] + direction[1] * t, from[2] + direction[2] * t)
    if (d < 0.0006) return 0
    least = Math.min(least, softness * d / t)
    t += clamp(d, 0.01, 0.4)
  }
  return smooth(0, 1, least)
}
function openness(map, p, n, reach = 1) {
  let closed = 0
  for (let i = 1; i <= 5; i++) {
    const h = reach * 0.06 * i * i / 2
    closed += Math.max(0, h - map(p[0] + n[0] * h, p[1] + n[1] * h, p[2] + n[2] * h)) / h / 2 ** (i - 1)
  }
  return clamp(1 - 0.75 * closed)
}
const smoothUnion = (a, b, k) => { const h = clamp(0.5 + 0.5 * (b - a) / k); return mix(b, a, h) - k * h * (1 - h) }

/** A still life: what is seen along a ray, lit by one soft window and the room. */
function stillLife({ map, surface, backdrop, window, windowColour, room, far = 14, reach = 1, haze = 0 }) {
  return (ray) => {
    const t = march(map, ray.origin, ray.direction, far)
    if (t === undefined) return backdrop(ray.direction, ray.origin)
    const p = add(ray.origin, ray.direction, t)
    let n = normalAt(map, p)
    const { albedo, gloss = 0, sharpness = 20, bump, own } = surface(p, n, ray)
    if (own) return own
    if (bump) n = unit(add(n, bump))
    const open = openness(map, p, n, reach), light = Math.max(0, dot(n, window)) * lit(map, add(p, n, 0.01), window, 7)
    const mirror = reflect(ray.direction, n), shine = gloss * Math.max(0, dot(mirror, window)) ** sharpness * (0.15 + light)
    const rim = gloss * 0.35 * (1 - Math.max(0, -dot(ray.direction, n))) ** 4 * open
    return [0, 1, 2].map(c => mix(albedo[c] * (windowColour[c] * light + room[c] * open * (0.65 + 0.35 * n[1])) + windowColour[c] * shine + room[c] * rim, room[c], clamp(haze * t)))
  }
}

// ── scenes ──

function ropeCoil() {
  const pitch = 0.3, radius = 0.145
  const strands = (u, v, s, r) => {
    const turn = s * 7.5, c = Math.cos(turn), q = Math.sin(turn)
    const x = u * c + v * q, y = -u * q + v * c
    let d = 9
    for (let i = 0; i < 3; i++) d = Math.min(d, Math.hypot(x - 0.5 * r * Math.cos(2.0944 * i), y - 0.5 * r * Math.sin(2.0944 * i)) - 0.5 * r)
    return d
  }
  const layer = (x, y, z, least, most, height) => {
    const r = Math.hypot(x, z), turn = Math.atan2(z, x) / (2 * Math.PI)
    const n = clamp(Math.round(r / pitch - turn), Math.ceil(least / pitch - turn), Math.floor(most / pitch - turn)), rc = pitch * (n + turn)
    return strands(r - rc, y - height, Math.PI * rc * rc / pitch, radius)
  }
  const end = (x, y, z) => {
    const t = clamp((x - 0.3) / 3.2), cx = 0.3 + 3.2 * t, cz = 1.98 + 0.5 * t + 0.35 * Math.sin(4 * t)
    return Math.max(strands(z - cz, y - radius, cx * 1.1, radius), Math.abs(x - 1.9) - 1.6)
  }
  const map = (x, y, z) => {
    if (y > 1) return y - 0.75
    return Math.min(y, 0.62 * Math.min(layer(x, y, z, 0.5, 2.02, radius), layer(x + 0.06, y, z - 0.04, 0.75, 1.72, 3 * radius - 0.035), end(x, y, z)))
  }
  const surface = ([x, y, z]) => {
    if (y > 0.012) {
      const fibre = noise(46 * x + 20 * y, 50 * y, 46 * z), wear = fractal(3 * x, 3 * y, 3 * z)
      const b = 0.34 + 0.3 * fibre * wear + 0.16 * wear
      return { albedo: [b * 1.02, b * 0.84, b * 0.58], gloss: 0.05, bump: [0.35 * (fibre - 0.5), 0.2 * (fibre - 0.5), 0.35 * (noise(50 * z, 46 * x) - 0.5)] }
    }
    const board = Math.floor(x / 0.62), edge = Math.abs(x / 0.62 - board - 0.5), grain = fractal(9 * x + 3 * board, 0.55 * z + 11 * board, 0, 6), rings = 0.5 + 0.5 * Math.sin(60 * (fractal(1.5 * x + 7 * board, 0.16 * z + board) + 0.06 * grain))
    const b = (0.1 + 0.11 * grain + 0.035 * rings + 0.05 * hash(board, 3, 1)) * (1 - 0.85 * smooth(0.485, 0.497, edge))
    return { albedo: [b * 1.12, b * 0.88, b * 0.68], gloss: 0.12 * grain, sharpness: 9, bump: [0.12 * (grain - 0.5), 0, 0.05 * (rings - 0.5)] }
  }
  const see = stillLife({ map, surface, backdrop: () => [0.01, 0.01, 0.01], window: unit([-0.82, 0.62, -0.35]), windowColour: [2.3, 2.2, 2.05], room: [0.16, 0.18, 0.22], reach: 1.3 })
  return { width: 1280, height: 960, samples: 2, eye: camera({ from: [0.5, 4.1, 4.4], to: [0.35, 0.1, 0.1], view: 0.5, opening: 0.045 }), see, exposure: 1.15 }
}

function bottles() {
  const through = (points) => (y) => {
    for (let i = 1; i < points.length; i++) if (y < points[i][0]) return mix(points[i - 1][1], points[i][1], smooth(points[i - 1][0], points[i][0], y))
    return points.at(-1)[1]
  }
  const shapes = [
    { x: -1.38, z: 0.1, top: 2.05, glass: [0.62, 0.8, 0.72], profile: through([[0, 0.42], [1.05, 0.42], [1.42, 0.15], [1.93, 0.13], [1.95, 0.19], [2.05, 0.19]]) },
    { x: -0.42, z: -0.18, top: 1.3, glass: undefined, profile: through([[0, 0.34], [0.3, 0.5], [0.75, 0.46], [1.02, 0.2], [1.15, 0.2], [1.3, 0.27]]) },
    { x: 0.5, z: 0.16, top: 2.5, glass: [0.86, 0.55, 0.22], profile: through([[0, 0.36], [1.5, 0.36], [1.78, 0.14], [2.38, 0.115], [2.4, 0.17], [2.5, 0.17]]) },
    { x: 1.36, z: -0.06, top: 0.95, glass: [0.84, 0.9, 0.92], profile: through([[0, 0.36], [0.62, 0.38], [0.72, 0.3], [0.74, 0.35], [0.95, 0.35]]) },
  ]
  const of = ({ x: cx, z: cz, top, profile }, x, y, z) => {
    const side = Math.hypot(x - cx, z - cz) - profile(clamp(y, 0, top))
    return 0.62 * (Math.max(side, y - top, -y) + (y > top || y < 0 ? 0 : 0)) - 0.006
  }
  const map = (x, y, z) => Math.min(y < 0 ? Math.max(y + 0, z - 1.1) : Math.max(y, 0) + (z > 1.1 ? 0.3 : 0), ...shapes.map(s => of(s, x, y, z)))
  const pane = (x, y) => {
    const cloud = fractal(0.4 * x + 3, 0.5 * y, 4), trees = smooth(0.2, -0.25, y - 0.75 - 0.9 * fractal(0.8 * x, 2, 1) - 0.25 * fractal(5 * x, 5 * y, 3))
    const bright = mix(1.25 + 0.5 * cloud + 0.14 * y, 0.34 + 0.2 * fractal(3 * x, 3 * y, 5), 0.82 * trees)
    const frame = Math.max(smooth(0.13, 0.09, Math.abs(x - 0.06)), smooth(0.11, 0.07, Math.abs(y - 2.05)), smooth(2.5, 2.56, Math.abs(x)))
    const wood = 0.05 + 0.04 * fractal(2 * x, 14 * y)
    return [mix(bright, wood * 1.05, frame), mix(bright * 1.01, wood, frame), mix(bright * 1.05, wood * 0.95, frame)]
  }
  const backdrop = (d, o) => {
    if (d[2] >= -0.02) return [0.06, 0.06, 0.07]
    const t = (-1.9 - o[2]) / d[2], blur = 0.02
    return pane(o[0] + d[0] * t + blur * (hash(Math.floor(d[0] * 1e5), Math.floor(d[1] * 1e5), 1) - 0.5), o[1] + d[1] * t)
  }
  const surface = (p, n, ray) => {
    const shape = p[1] > 0.012 && shapes.reduce((best, s) => of(s, ...p) < of(best, ...p) ? s : best)
    if (!shape) {
      const grain = fractal(0.8 * p[0], 11 * p[2], 1, 6), b = 0.26 + 0.24 * grain
      const back = backdrop(unit(add(reflect(ray.direction, [0.03 * (grain - 0.5), 1, 0.02 * (grain - 0.5)]), [0, 0, 0])), p), through = openness(map, p, [0, 1, 0], 2.2)
      let shade = 1, tint = [1, 1, 1]
      for (const s of shapes) {
        const dz = p[2] - s.z, spread = 0.5 + 0.12 * Math.max(0, dz), fall = Math.exp(-0.55 * Math.max(0, dz))
        const inside = smooth(spread, spread * 0.55, Math.abs(p[0] - s.x * (1 + 0.06 * dz))) * smooth(-0.3, 0.1, dz) * fall
        shade *= 1 - (s.glass ? 0.4 : 0.72) * inside
        if (s.glass) tint = tint.map((c, i) => mix(c, s.glass[i], 0.8 * inside))
      }
      return { own: [0, 1, 2].map(c => (b * [1, 0.93, 0.84][c] * 0.75 * shade * tint[c] * (0.3 + 0.7 * through) + 0.16 * back[c] * through)) }
    }
    const facing = Math.max(0, -dot(n, ray.direction)), rim = (1 - facing) ** 3
    if (!shape.glass) {
      const glaze = fractal(2.4 * p[0], 5 * p[1], 2.4 * p[2]), b = 0.17 + 0.12 * glaze - 0.05 * smooth(0.55, 0.62, p[1] + 0.14 * glaze)
      const behind = backdrop(reflect(ray.direction, n), p)
      const side = 0.5 + 0.5 * Math.abs(n[0]) ** 2
      return { own: [0, 1, 2].map(c => b * [1, 0.95, 0.86][c] * (0.35 + 0.9 * side * Math.max(0, 0.45 - n[2] * 0.8)) + (0.05 + 0.8 * rim) * behind[c] * 0.6) }
    }
    // Glass bends what lies behind it to the other side, and is thick where it turns away.
    const bent = unit([ray.direction[0] - 1.5 * n[0] * facing * 0.5, ray.direction[1] - 0.5 * n[1], ray.direction[2]]), behind = backdrop(bent, p), mirrored = backdrop(reflect(ray.direction, n), p)
    const thick = 1 + 3.2 * (1 - facing) ** 1.5, level = smooth(0.72, 0.7, p[1]) * 0.35
    const glint = 0.8 * Math.max(0, dot(n, unit([-0.75, 0.35, 0.55]))) ** 90
    return { own: [0, 1, 2].map(c => behind[c] * (shape.glass[c] ** (thick + level * 2)) * (0.94 - 0.62 * smooth(0.3, 0.02, facing)) + 0.5 * rim * mirrored[c] * 0.5 + glint) }
  }
  const see = stillLife({ map, surface, backdrop, window: [0, 0.6, -0.8], windowColour: [1, 1, 1], room: [0.1, 0.1, 0.1], far: 12 })
  return { width: 1250, height: 1000, samples: 2, eye: camera({ from: [0.1, 1.5, 6.2], to: [0.02, 1.12, 0], view: 0.315, opening: 0.05 }), see, exposure: 0.8 }
}

function pears() {
  const pear = (x, y, z, [cx, cy, cz], lean, size) => {
    let [a, b, c] = [(x - cx) / size, (y - cy) / size, (z - cz) / size]
    const k = Math.cos(lean), s = Math.sin(lean);
    [a, b] = [a * k + b * s, -a * s + b * k]
    const body = smoothUnion(Math.hypot(a, b - 0.5, c) - 0.5, Math.hypot(a, b - 1.08, c) - 0.22, 0.42)
    const stalk = Math.max(Math.hypot(a - 0.18 * (b - 1.25) ** 2 * 4, c) - 0.028 - 0.02 * clamp(b - 1.45), Math.abs(b - 1.4) - 0.2)
    return size * Math.min(body, 0.8 * stalk)
  }
  const places = [[[-0.85, 0, 0.1], 0.06, 1.05], [[0.25, 0, -0.3], -0.1, 1.16], [[1.35, 0.42, 0.35], -1.42, 0.95]]
  const bowl = (x, y, z) => Math.max(Math.abs(Math.hypot(x - 2.6, (y - 1.05) * 1.15, z + 1.3) - 0.98) - 0.03, y - 0.95) * 0.8
  const fold = (x, z) => 0.05 * Math.sin(2.2 * x + 1.3 * z + 1.4 * Math.sin(0.9 * x - 0.7 * z)) * smooth(0.2, 1.8, z) + 0.012 * Math.sin(3.1 * x + 1.7 * z)
  const map = (x, y, z) => {
    const table = y > 0.4 ? y - 0.15 : 0.8 * (y - fold(x, z) + 0.03)
    return Math.min(table, z + 3.4, bowl(x, y, z), ...places.map(([p, lean, size]) => pear(x, y, z, p, lean, size)))
  }
  const surface = (p) => {
    const [x, y, z] = p
    if (z < -3.36) { const b = 0.05 + 0.07 * fractal(0.7 * x, 0.7 * y, 1) + 0.02 * fractal(20 * x, 20 * y); return { albedo: [b * 0.95, b, b * 1.02] } }
    if (bowl(x, y, z) < 0.006) return { albedo: [0.5, 0.52, 0.54], gloss: 0.35, sharpness: 50 }
    const distances = places.map(([at, lean, size]) => pear(x, y, z, at, lean, size)), nearest = distances.indexOf(Math.min(...distances))
    if (distances[nearest] < 0.006) {
      const blush = fractal(1.3 * x + 5 * nearest, 1.3 * y, 1.3 * z), speck = smooth(0.74, 0.84, noise(38 * x, 38 * y, 38 * z)), patch = smooth(0.5, 0.66, fractal(4 * x, 4 * y, 4 * z + nearest))
      const b = [0.5 + 0.12 * blush, 0.46 - 0.1 * blush * nearest / 2, 0.14].map(c => c * (1 - 0.45 * speck) * (1 - 0.28 * patch))
      return { albedo: b, gloss: 0.22, sharpness: 22, bump: [0.05 * (blush - 0.5), 0.05 * (patch - 0.5), 0] }
    }
    const weave = 0.5 + 0.25 * Math.sin(150 * x) + 0.25 * Math.sin(150 * z), b = 0.62 + 0.05 * weave + 0.08 * fractal(1.2 * x, 1.2 * z)
    return { albedo: [b, b * 0.97, b * 0.9], bump: [0.08 * (weave - 0.5), 0, 0.08 * (fractal(20 * x, 20 * z) - 0.5)] }
  }
  const see = stillLife({ map, surface, backdrop: () => [0.02, 0.02, 0.02], window: unit([-0.85, 0.5, 0.28]), windowColour: [1.75, 1.7, 1.6], room: [0.09, 0.1, 0.12], reach: 1.6 })
  return { width: 1250, height: 1000, samples: 2, eye: camera({ from: [0.4, 1.75, 5.6], to: [0.42, 0.62, 0], view: 0.33, opening: 0.06 }), see, exposure: 1 }
}

function riverFog() {
  const shore = 0.02
  const trees = (x, layer) => {
    const { base, height, scale } = layer
    const crowns = fractal(scale * x + layer.at, 0.5, layer.at, 4), twigs = fractal(14 * scale * x, 7, layer.at, 5)
    return base + height * (0.25 + 0.9 * smooth(0.35, 0.75, crowns)) + 0.05 * height * (twigs - 0.5) * 4
  }
  const layers = [
    { at: 3, base: 0.1, height: 0.2, scale: 1.1, tone: 0.62, fog: 0.72 }, { at: 11, base: 0.06, height: 0.24, scale: 1.7, tone: 0.4, fog: 0.5 },
    { at: 23, base: 0.015, height: 0.2, scale: 2.6, tone: 0.2, fog: 0.24 },
  ]
  const above = (x, y) => {
    const sun = Math.exp(-((x - 0.45) ** 2 * 1.7 + (y - 0.62) ** 2 * 3)), drift = fractal(1.2 * x, 4 * y, 8)
    let tone = 0.52 + 0.4 * sun + 0.06 * drift - 0.1 * y
    for (const layer of layers) {
      const top = trees(x, layer), leaf = fractal(40 * x, 40 * y, layer.at), seen = smooth(0.006, -0.006, y - top + 0.02 * (leaf - 0.5) * (1 + 0.5 * layer.scale))
      const veil = clamp(layer.fog + 0.6 * Math.exp(-Math.max(0, y - layer.base + 0.04) * 16) + 0.25 * (drift - 0.5))
      tone = mix(tone, mix(layer.tone * (0.35 + 0.4 * leaf), 0.66 + 0.16 * sun, veil), seen)
    }
    return tone
  }
  const posts = [[-0.82, 0.1, -0.36, 0.034], [-0.5, 0.06, -0.22, 0.022], [-0.3, 0.035, -0.14, 0.015], [-0.17, 0.025, -0.09, 0.011]]
  const see = ({ x, y }) => {
    const wave = y < shore ? (shore - y) : 0, near = clamp(wave * 1.6)
    const ripple = wave === 0 ? 0 : (fractal(2 * x / (0.15 + wave), 60 * wave ** 0.55, 2) - 0.5) * 0.06 * (0.3 + near)
    const mirrored = y >= shore ? above(x, y - shore) : above(x + ripple * 0.8, wave * 0.85 + ripple) * (0.86 - 0.42 * near) + 0.03
    let tone = mirrored + (y < shore ? 0.045 * (fractal(3 * x / (0.1 + wave), 90 * wave ** 0.5, 5) - 0.5) : 0)
    tone = mix(tone, 0.74, 0.65 * Math.exp(-(((y - shore) / 0.05) ** 2)) * (0.5 + fractal(1.5 * x, 9, 4)))
    for (const [px, top, foot, half] of posts) {
      const width = half * (1 + 0.07 * fractal(3, 30 * y + px)), bark = fractal(60 * (x - px) / half * 0.08, 10 * y + px * 30), shape = smooth(width, width * 0.9, Math.abs(x - px)), round = (x - px) / width
      const own = (0.035 + 0.1 * bark) * (1 + 0.9 * clamp(round)) + 0.34 * (1 - half / 0.036) ** 1.2
      if (y > foot) tone = mix(tone, own, shape * smooth(top + 0.004, top - 0.004, y - 0.01 * fractal(40 * x, px)))
      else if (y > 2 * foot - top) {
        const sway = smooth(width, width * 0.8, Math.abs(x - px + ripple * 0.5))
        tone = mix(tone, own * 1.15 + 0.04, 0.72 * sway * smooth(2 * foot - top, foot, y))
      }
    }
    for (let i = 1; i < posts.length; i++) {
      const [a, b] = [posts[i - 1], posts[i]], t = clamp((x - a[0]) / (b[0] - a[0]))
      if (x <= a[0] || x >= b[0]) continue
      const hang = mix(a[1], b[1], t) - mix(a[3], b[3], t) * 2.6 - 0.5 * (b[0] - a[0]) * 4 * t * (1 - t) * 0.22
      tone = mix(tone, 0.06 + 0.3 * (1 - mix(a[3], b[3], t) / 0.036), smooth(mix(a[3], b[3], t) * 0.22, mix(a[3], b[3], t) * 0.12, Math.abs(y - hang)))
    }
    const light = clamp(tone, 0.012) ** 1.9
    return [light * 0.985, light, light * mix(1.1, 0.97, tone)]
  }
  return { width: 1600, height: 1067, samples: 4, eye: (x, y) => ({ x: x * 1, y: y * 1 }), see, exposure: 1.32 }
}

function brickLight() {
  const brick = (x, y) => {
    const row = Math.floor(y / 0.155), shift = (row % 2 ? 0.5 : 0) + 0.06 * hash(row, 2, 9), column = Math.floor(x / 0.46 + shift)
    const u = Math.abs(x / 0.46 + shift - column - 0.5) * 0.46, v = Math.abs(y / 0.155 - row - 0.5) * 0.155, wobble = 0.012 * (fractal(9 * x, 9 * y, 2) - 0.5)
    return { inside: smooth(0.216, 0.2, u + wobble) * smooth(0.068, 0.053, v + wobble), kind: hash(column, row, 4), tilt: hash(column, row, 7) - 0.5 }
  }
  const height = (x, y) => {
    const { inside, kind, tilt } = brick(x, y)
    return 0.02 * inside * (0.75 + 0.5 * kind) + 0.006 * inside * tilt * Math.sin(7 * x) + 0.012 * fractal(14 * x, 14 * y, 1) + 0.007 * fractal(55 * x, 55 * y, 3, 3) - 0.02 * smooth(0.66, 0.8, fractal(3 * x, 3 * y, 6))
  }
  // The sun comes in through a tall window with small panes, which lies askew on the wall.
  const sunlit = (x, y) => {
    const a = x + 0.34 * y - 0.1, b = y - 0.12 * x + 0.05, soft = 0.02
    const arch = b > 0.55 ? Math.hypot(a / 0.52, (b - 0.55) / 0.3) : Math.abs(a) / 0.52
    const opening = smooth(1 + soft * 2, 1 - soft * 2, arch) * smooth(-0.98, -0.94, b)
    const bars = Math.max(smooth(0.03, 0.012, Math.abs(a + 0.17)), smooth(0.03, 0.012, Math.abs(a - 0.17)), smooth(0.03, 0.012, Math.abs(((b + 1.05) % 0.38) - 0.19)))
    const leaves = smooth(0.5, 0.62, fractal(2.6 * a + 3, 2.6 * b, 12)) * smooth(-0.2, 0.7, b + a)
    return opening * (1 - 0.93 * bars) * (1 - 0.7 * leaves)
  }
  // a length of rope from a peg
  const ropeAt = (x, y) => {
    const t = clamp((0.62 - y) / 1.15), centre = -0.56 + 0.05 * Math.sin(3 * t), loop = Math.abs(x - centre) - 0.16 * Math.sin(Math.PI * t) ** 0.6
    return { off: loop, on: y < 0.66 && y > -0.54 ? smooth(0.034, 0.028, Math.abs(loop)) : 0, along: y }
  }
  const see = ({ x, y }) => {
    const e = 0.0022, h = height(x, y), n = unit([-(height(x + e, y) - h) / e, -(height(x, y + e) - h) / e, 1])
    const sun = unit([-0.86, 0.36, 0.4]), cast = 1 - smooth(0, 0.014, height(x - 0.03, y + 0.012) - h - 0.004)
    const { inside, kind } = brick(x, y), stain = fractal(1.1 * x, 0.7 * y, 9), lime = smooth(0.56, 0.7, fractal(2.2 * x, 1.3 * y, 15))
    const clay = [0.42 + 0.16 * kind, 0.23 + 0.1 * kind, 0.16 + 0.07 * kind], mortar = [0.5, 0.47, 0.42]
    let albedo = [0, 1, 2].map(c => mix(mix(mortar[c], clay[c], inside), 0.66, 0.55 * lime) * (0.6 + 0.55 * stain))
    let shadowed = 1 - 0.7 * ropeAt(x - 0.055, y + 0.03).on, facing = n
    const rope = ropeAt(x, y)
    if (rope.on > 0) {
      const lay = 0.5 + 0.5 * Math.sin(95 * rope.along + 60 * rope.off), round = clamp(rope.off / 0.034, -1, 1)
      albedo = albedo.map((c, i) => mix(c, [0.62, 0.52, 0.37][i] * (0.45 + 0.55 * lay), rope.on))
      facing = unit(add([round, 0.3 * (lay - 0.5), 0.75], n, 1 - rope.on))
      shadowed = 1
    }
    const peg = Math.hypot(x + 0.56, y - 0.66)
    const light = Math.max(0, dot(facing, sun)) * cast * sunlit(x, y) * shadowed * 2.5
    const room = 0.1 + 0.05 * (x + 1) / 2 + 0.03 * facing[1]
    const dark = mix(1, 0.12, smooth(0.05, 0.042, peg))
    return [0, 1, 2].map(c => albedo[c] * dark * (light * [1.06, 0.98, 0.84][c] + room * [0.85, 0.95, 1.15][c]))
  }
  return { width: 1125, height: 1500, samples: 4, eye: (x, y) => ({ x, y }), see, exposure: 1.25 }
}

function ropeWalk() {
  const [half, high, every] = [2.1, 3.1, 2.7]
  const sun = unit([0.83, 0.5, -0.25])
  const inWindow = (y, z, soft) => {
    const local = ((z % every) + every) % every - every / 2
    const hole = smooth(0.72 + soft, 0.72 - soft, Math.abs(local)) * smooth(0.8 - soft, 0.8 + soft, y) * smooth(2.65 + soft, 2.65 - soft, y)
    const bars = Math.max(smooth(0.045 + soft, 0.03, Math.abs(local)), smooth(0.04 + soft, 0.025, Math.abs(((y - 0.8) % 0.62) - 0.31 - 0.3)))
    return hole * (1 - (1 - clamp(soft * 3)) * bars)
  }
  const sunAt = (p, soft) => {
    const t = (half - p[0]) / sun[0]
    return inWindow(p[1] + sun[1] * t, p[2] + sun[2] * t, soft + 0.02 * t)
  }
  const skyAt = (p) => {
    const d = half - p[0] + 0.35, z = ((p[2] % every) + every) % every - every / 2
    return 1.15 / (1 + d * d * 0.55) * (0.6 + 0.4 * Math.exp(-z * z * 0.6 / d))
  }
  const see = (ray) => {
    const { origin: o, direction: d } = ray
    const hits = [[1, d[1] < 0 ? -o[1] / d[1] : (high - o[1]) / d[1]], [0, d[0] < 0 ? (-half - o[0]) / d[0] : (half - o[0]) / d[0]], [2, (-46 - o[2]) / d[2]]].filter(h => h[1] > 0)
    let [axis, t] = hits.reduce((a, b) => a[1] < b[1] ? a : b)
    let post
    // Posts stand along the left, each a square of wood.
    for (let k = 0; k < 17; k++) {
      const z = -1.3 - k * every
      for (const [face, at] of [[2, z + 0.13], [0, -0.95 + 0.13], [0, -0.95 - 0.13]]) {
        const s = (at - o[face]) / d[face], q = add(o, d, s)
        if (s > 0 && s < t && Math.abs(q[0] + 0.95) <= 0.1301 && Math.abs(q[2] - z) <= 0.1301) { t = s; axis = face; post = k + 1 }
      }
    }
    const p = add(o, d, t), far = clamp(1 - Math.exp(-t * 0.04))
    const hazy = colour => colour.map((c, i) => mix(c, [0.62, 0.6, 0.55][i], far * 0.75))
    if (!post && axis === 0 && d[0] > 0) {
      const open = inWindow(p[1], p[2], 0.006), view = 2.1 - 0.5 * smooth(1.4, 0.9, p[1] + 0.4 * fractal(2 * p[2], p[1]))
      const wall = 0.1 + 0.06 * fractal(3 * p[1], 3 * p[2])
      return hazy([mix(wall, view, open), mix(wall * 0.98, view, open), mix(wall * 0.95, view * 1.02, open)])
    }
    let albedo, n
    if (post) {
      const b = 0.2 + 0.16 * fractal(24 * (axis === 2 ? p[0] : p[2]), 1.2 * p[1], post)
      albedo = [b, b * 0.86, b * 0.7]
      n = axis === 2 ? [0, 0, 1] : [d[0] < 0 ? 1 : -1, 0, 0]
    }
    else if (axis === 1 && d[1] < 0) {
      const board = Math.floor(p[0] / 0.21), edge = Math.abs(p[0] / 0.21 - board - 0.5), grain = fractal(22 * p[0], 0.8 * p[2] + 5 * board, board)
      const b = (0.22 + 0.2 * grain + 0.1 * hash(board, Math.floor((p[2] + 7 * hash(board, 1, 1)) / 3.3), 2)) * (1 - 0.8 * smooth(0.47, 0.495, edge))
      albedo = [b, b * 0.86, b * 0.7]
      n = [0.06 * (grain - 0.5), 1, 0]
    }
    else if (axis === 1) {
      const beam = smooth(0.2, 0.17, Math.abs(((p[2] % every) + every) % every - every / 2))
      const b = mix(0.36 + 0.1 * fractal(3 * p[0], 3 * p[2]), 0.1, beam)
      albedo = [b, b * 0.96, b * 0.9]
      n = [0, -1, 0]
    }
    else {
      const lime = fractal(1.4 * p[1], 0.8 * p[2], 5), row = Math.abs((p[1] / 0.16) % 1 - 0.5), b = 0.44 + 0.26 * lime - 0.05 * smooth(0.44, 0.49, row)
      albedo = [b, b * 0.97, b * 0.92]
      n = axis === 0 ? [1, 0, 0.1 * (lime - 0.5)] : [0, 0, 1]
    }
    let light = Math.max(0, dot(n, sun)) * sunAt(p, 0.03) * 3.2
    const foot = Math.min(1, 0.35 + 1.2 * Math.min(p[1] + (axis === 1 ? 9 : 0), high - p[1] + (axis === 1 ? 9 : 0), half - Math.abs(p[0]) + (axis === 0 && !post ? 9 : 0)))
    for (let k = 0; k < 17; k++) {
      const z = -1.3 - k * every, s = (-0.95 - p[0]) / sun[0]
      if (!post && s > 0 && Math.abs(p[2] + sun[2] * s - z) < 0.15) light *= 0.06
    }
    const contact = !post && axis === 1 && d[1] < 0 ? 1 - 0.6 * Math.max(0, ...Array.from({ length: 17 }, (_, k) => Math.exp(-9 * Math.hypot(p[0] + 0.95, p[2] + 1.3 + k * every)))) : 1
    const room = (0.16 + 0.5 * skyAt(p) * Math.max(0.25, n[0] + 0.45)) * foot * contact
    const shine = axis === 1 && d[1] < 0 && !post ? (() => { const r = (half - p[0]) / Math.max(0.05, d[0]); return d[0] > 0.05 ? 0.1 * smooth(0.05, 0.4, d[0]) * inWindow(p[1] - d[1] * r, p[2] + d[2] * r, 0.16) : 0 })() : 0
    return hazy([0, 1, 2].map(c => albedo[c] * (light * [1.05, 0.98, 0.86][c] + room * [0.95, 1, 1.06][c]) + shine))
  }
  return { width: 1200, height: 1500, samples: 5, eye: camera({ from: [0.15, 1.5, 1.6], to: [-0.12, 1.32, -6], view: 0.56, opening: 0.01 }), see, exposure: 0.95 }
}

const scenes = { 'rope-coil': ropeCoil, bottles, pears, 'river-fog': riverFog, 'brick-light': brickLight, 'rope-walk': ropeWalk }

// ── film, and the file ──

/** Light to code: a filmic shoulder, a soft toe, sRGB's own encoding. */
function develop(light) {
  const v = Math.max(0, light), held = v * (2.51 * v * 0.6 + 0.03) / (v * (2.43 * v * 0.6 + 0.59) + 0.14)
  const w = clamp(mix(held, 1 - Math.exp(-v), 0.35))
  return w <= 0.0031308 ? 12.92 * w : 1.055 * w ** (1 / 2.4) - 0.055
}

async function render(name) {
  const { width, height, samples, eye, see, exposure } = scenes[name]()
  const random = chance(seed + name.length * 7919), pixels = Buffer.alloc(width * height * 3), grain = new Float32Array(width * height)
  for (let i = 0; i < grain.length; i++) grain[i] = random() + random() + random() - 1.5
  const long = Math.max(width, height)
  for (let y = 0; y < height; y++) {
    for (let x = 0; x < width; x++) {
      const sum = [0, 0, 0]
      for (let s = 0; s < samples; s++) {
        const u = (2 * (x + random()) - width) / long, v = -(2 * (y + random()) - height) / long
        const seen = see(eye(u, v, random))
        for (let c = 0; c < 3; c++) sum[c] += Math.min(seen[c], 3)
      }
      const u = (2 * x - width) / long, v = (2 * y - height) / long, corner = 1 - 0.17 * (u * u + v * v)
      const at = y * width + x, coarse = 0.6 * grain[at] + 0.2 * ((grain[at + 1] ?? 0) + (grain[at + width] ?? 0))
      for (let c = 0; c < 3; c++) {
        const code = develop(sum[c] / samples * exposure * corner)
        pixels[3 * at + c] = Math.round(255 * clamp(code + 0.02 * coarse * (0.5 + 2 * code * (1 - code))))
      }
    }
  }
  mkdirSync(folder, { recursive: true })
  for (let quality = 86; ; quality -= 3) {
    const file = await sharp(pixels, { raw: { width, height, channels: 3 } }).jpeg({ quality, chromaSubsampling: '4:2:0', mozjpeg: true }).toBuffer()
    if (file.length > 300_000 && quality > 50) continue
    writeFileSync(join(folder, `${name}.jpg`), file)
    process.stdout.write(`${name}: ${width} × ${height}, quality ${quality}, ${Math.round(file.length / 1000)} kB\n`)
    return
  }
}

for (const name of process.argv.length > 2 ? process.argv.slice(2) : Object.keys(scenes)) await render(name)

/** Three rows of three numbers. */
export type Matrix3 = readonly [Vector3, Vector3, Vector3]
export type Vector3 = readonly [number, number, number]

/** The matrix times a column. */
export const transform = (m: Matrix3, v: Vector3): Vector3 => [dot(m[0], v), dot(m[1], v), dot(m[2], v)]

/** `a` after `b`. */
export const multiply = (a: Matrix3, b: Matrix3): Matrix3 => transpose([
  transform(a, column(b, 0)), transform(a, column(b, 1)), transform(a, column(b, 2)),
])

/** Inverse by cofactors; meant for the well-conditioned matrices of colour spaces. */
export function invert([a, b, c]: Matrix3): Matrix3 {
  const [p, q, r] = [cross(b, c), cross(c, a), cross(a, b)]
  const determinant = dot(a, p)
  return transpose([scale(p, 1 / determinant), scale(q, 1 / determinant), scale(r, 1 / determinant)])
}

const dot = (a: Vector3, b: Vector3): number => a[0] * b[0] + a[1] * b[1] + a[2] * b[2]
const scale = (v: Vector3, by: number): Vector3 => [v[0] * by, v[1] * by, v[2] * by]
const column = (m: Matrix3, i: 0 | 1 | 2): Vector3 => [m[0][i], m[1][i], m[2][i]]
const transpose = (m: Matrix3): Matrix3 => [column(m, 0), column(m, 1), column(m, 2)]
const cross = (a: Vector3, b: Vector3): Vector3 => [
  a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0],
]

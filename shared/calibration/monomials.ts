/** The monomials of degree 1 … `degree` of each position: x, y, x², xy, y², … one row a position. */
export function monomials(places: readonly { x: number, y: number }[], degree: number): Float64Array {
  return Float64Array.from(places.flatMap(({ x, y }) => {
    const row: number[] = []
    for (let total = 1; total <= degree; total++)
      for (let ofY = 0; ofY <= total; ofY++) row.push(x ** (total - ofY) * y ** ofY)
    return row
  }))
}

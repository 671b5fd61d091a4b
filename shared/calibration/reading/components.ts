/** A connected light area: its number in the label plane and its box (inclusive), in pixels. */
export interface Component { label: number, x0: number, y0: number, x1: number, y1: number, area: number }

/** Labels by pixel (0 = not light; a component's pixels carry its `label`) and the components. */
export interface Labelled { labels: Int32Array, components: Component[] }

/**
 * The 4-connected areas of a 0/1 mask: two passes with union–find (Rosenfeld and Pfaltz, J. ACM 13(4):471–494, 1966).
 */
export function labelComponents(mask: Uint8Array, width: number, height: number): Labelled {
  const labels = new Int32Array(width * height)
  const parents: number[] = [0]
  for (let y = 0, at = 0; y < height; y++) {
    for (let x = 0; x < width; x++, at++) {
      if (!mask[at]) continue
      const left = x > 0 ? labels[at - 1]! : 0
      const above = y > 0 ? labels[at - width]! : 0
      if (left && above) {
        labels[at] = left
        if (left !== above) join(parents, left, above)
      }
      else if (left || above) labels[at] = left || above
      else labels[at] = parents.push(parents.length) - 1
    }
  }
  return { labels, components: measure(labels, parents, width, height) }
}

function rootOf(parents: number[], label: number): number {
  let root = label
  while (parents[root] !== root) root = parents[root]!
  while (parents[label] !== root) [label, parents[label]] = [parents[label]!, root]
  return root
}

function join(parents: number[], a: number, b: number): void {
  const [p, q] = [rootOf(parents, a), rootOf(parents, b)]
  parents[Math.max(p, q)] = Math.min(p, q)
}

/** Second pass: labels become their roots, boxes and areas are taken. */
function measure(labels: Int32Array, parents: number[], width: number, height: number): Component[] {
  const roots = Int32Array.from(parents, (_, label) => rootOf(parents, label))
  const byRoot: (Component | undefined)[] = []
  for (let y = 0, at = 0; y < height; y++) {
    for (let x = 0; x < width; x++, at++) {
      if (!labels[at]) continue
      const label = labels[at] = roots[labels[at]!]!
      const component = byRoot[label] ??= { label, x0: x, y0: y, x1: x, y1: y, area: 0 }
      component.area++
      if (x < component.x0) component.x0 = x
      if (x > component.x1) component.x1 = x
      component.y1 = y
    }
  }
  return byRoot.filter(component => component !== undefined)
}

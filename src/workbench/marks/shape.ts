import type { Marker } from '../store/series'

/** Corners of a figure around the origin, from the top clockwise, as SVG path data. */
function polygon(corners: readonly (readonly [number, number])[]): string {
  return `M${corners.map(([x, y]) => `${round(x)} ${round(y)}`).join('L')}Z`
}

function round(value: number): number {
  return Math.round(value * 100) / 100
}

function regular(corners: number, radius: number, inner = radius): string {
  const steps = inner === radius ? corners : corners * 2
  return polygon(
    Array.from({ length: steps }, (_, step) => {
      const angle = (2 * Math.PI * step) / steps - Math.PI / 2
      const reach = step % 2 === 1 && inner !== radius ? inner : radius
      return [reach * Math.cos(angle), reach * Math.sin(angle)]
    }),
  )
}

/** SVG path data of a marker around the origin. `radius` is a disc's; the others are drawn to weigh about the same. */
export function markerPath(marker: Marker, radius: number): string {
  const r = radius
  switch (marker) {
    case 'disc':
      return `M${-r} 0A${r} ${r} 0 1 1 ${r} 0A${r} ${r} 0 1 1 ${-r} 0Z`
    case 'square':
      return polygon([
        [-0.92 * r, -0.92 * r],
        [0.92 * r, -0.92 * r],
        [0.92 * r, 0.92 * r],
        [-0.92 * r, 0.92 * r],
      ])
    case 'triangle':
      return polygon([
        [0, -1.1 * r],
        [1.25 * r, 1.07 * r],
        [-1.25 * r, 1.07 * r],
      ])
    case 'diamond':
      return polygon([
        [0, -1.35 * r],
        [1.2 * r, 0],
        [0, 1.35 * r],
        [-1.2 * r, 0],
      ])
    case 'cap':
      return polygon([
        [-1.25 * r, -1.07 * r],
        [1.25 * r, -1.07 * r],
        [0, 1.1 * r],
      ])
    case 'pentagon':
      return regular(5, 1.2 * r)
    case 'bowtie':
      return polygon([
        [-1.2 * r, -r],
        [1.2 * r, r],
        [1.2 * r, -r],
        [-1.2 * r, r],
      ])
    case 'star':
      return regular(5, 1.45 * r, 0.65 * r)
  }
}

/** SVG path data of the cross that stands for a broken claim. */
export function crossPath(radius: number): string {
  return `M${-radius} ${-radius}L${radius} ${radius}M${radius} ${-radius}L${-radius} ${radius}`
}

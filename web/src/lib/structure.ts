// Turns the coordinates of a minimum into the text and colours that the viewer takes.

/** Element colours of the page; the trade's convention (carbon dark, oxygen red, nitrogen blue …) in our own shades. */
export const elementColours: Record<string, number> = {
  H: 0xdfe8e6,
  C: 0x37535a,
  N: 0x3566c4,
  O: 0xc8443c,
  F: 0x6fb04b,
  Si: 0xb99a6b,
  P: 0xd9822b,
  S: 0xd8b63a,
  Cl: 0x3f9a4f,
  Br: 0x8c4a2f,
  I: 0x6b4a8c,
}

/** XYZ text of one structure, Å. */
export function xyzText(title: string, elements: string[], xyz: [number, number, number][]): string {
  const rows = xyz.map((p, i) => `${elements[i] ?? 'X'} ${p.map((v) => v.toFixed(6)).join(' ')}`)
  return [String(xyz.length), title.replaceAll('\n', ' '), ...rows, ''].join('\n')
}

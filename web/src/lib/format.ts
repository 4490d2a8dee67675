// Numbers as a chemist reads them; a value that is not there is an en dash, never a zero.

const NONE = '–'

export function fixed(value: number | undefined, digits: number): string {
  if (value === undefined || !Number.isFinite(value)) return NONE
  const text = value.toFixed(digits)
  return (Number(text) === 0 ? text.replace('-', '') : text).replace('-', '−')
}

export function percent(fraction: number | undefined, digits = 1): string {
  if (fraction === undefined || !Number.isFinite(fraction)) return NONE
  const smallest = 10 ** -digits
  if (fraction > 0 && fraction * 100 < smallest / 2) return `< ${(smallest / 2).toFixed(digits + 1)} %`
  return `${(fraction * 100).toFixed(digits)} %`
}

export function duration(seconds: number | undefined): string {
  if (seconds === undefined || !Number.isFinite(seconds) || seconds < 0) return NONE
  if (seconds < 60) return `${Math.round(seconds)} s`
  if (seconds < 3600) return `${Math.floor(seconds / 60)} min ${Math.round(seconds % 60)} s`
  return `${Math.floor(seconds / 3600)} h ${Math.round((seconds % 3600) / 60)} min`
}

export function count(value: number | undefined): string {
  return value === undefined ? NONE : value.toLocaleString('en-GB').replaceAll(',', '\u202f')
}

/** Splits C16H30O into runs of plain and subscript text. */
export function formulaParts(formula: string): { text: string; sub: boolean }[] {
  return [...formula.matchAll(/(\d+)|([^\d]+)/g)].map((m) => ({ text: m[0], sub: m[1] !== undefined }))
}

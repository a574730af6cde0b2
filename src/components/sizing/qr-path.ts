/** Modules of a QR code, dark ones true. */
export interface QrModules {
  size: number
  get: (row: number, column: number) => unknown
}

/** The dark modules as one SVG path, a run of a row at a time, one unit a module. */
export function qrPath({ size, get }: QrModules): string {
  let path = ''
  for (let row = 0; row < size; row++)
    for (let column = 0; column < size; column++) {
      if (!get(row, column)) continue
      const from = column
      while (column + 1 < size && get(row, column + 1)) column++
      path += `M${from} ${row}h${column + 1 - from}v1H${from}z`
    }
  return path
}

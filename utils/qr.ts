import { create } from 'qrcode'

/** A code as one path of unit squares on a grid. */
export interface QrDrawing {
  /** Modules along one side, without the quiet zone. */
  size: number
  d: string
}

/**
 * Draws a text as a QR code at level M: a quarter of it may be smudged and it still reads.
 *
 * @throws when the text is too long for any code
 */
export function drawQr(text: string): QrDrawing {
  const { modules } = create(text, { errorCorrectionLevel: 'M' })
  const { size } = modules
  let d = ''
  for (let y = 0; y < size; y += 1) {
    for (let x = 0; x < size; x += 1) {
      if (modules.get(y, x)) d += `M${x} ${y}h1v1h-1z`
    }
  }
  return { size, d }
}

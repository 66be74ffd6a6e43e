/** Runs once the next picture is on the screen: a frame's own work is over when the task behind it begins. */
export function afterPaint(work: () => void): void {
  requestAnimationFrame(() => { setTimeout(work) })
}

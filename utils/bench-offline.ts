/**
 * Puts the bench's page and files on this tablet, so that it starts without a network too. Browsers allow that on https
 * and on the machine's own address only; elsewhere the bench starts with the network.
 */
export async function keepForOffline(): Promise<void> {
  if (import.meta.dev || !('serviceWorker' in navigator)) return
  await navigator.serviceWorker.register('/bench-worker.js', { scope: '/bench' })
}

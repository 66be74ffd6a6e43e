/**
 * Lets the bench start without a network: its page and its built files lie in a cache of their own, one for each build.
 * Pages come from the network first. What the API says is never kept here; the bench has its own disk for that.
 */
const build = '__BUILD__'
const files = ['__FILES__']

const cacheName = `potbell-bench-${build}`
const shell = '/bench'
/** A network that answers nothing in this time is none. */
const patienceMs = 4000

self.addEventListener('install', (event) => {
  event.waitUntil(fill())
})

async function fill() {
  const cache = await caches.open(cacheName)
  await cache.addAll([...files, new Request(shell, { cache: 'reload' })])
  // Every file is here: pages that are open now have theirs already.
  await self.skipWaiting()
}

self.addEventListener('activate', (event) => {
  event.waitUntil(dropOlder())
})

async function dropOlder() {
  const names = await caches.keys()
  await Promise.all(names.filter(name => name.startsWith('potbell-bench-') && name !== cacheName).map(name => caches.delete(name)))
}

self.addEventListener('fetch', (event) => {
  const { request } = event
  const url = new URL(request.url)
  if (request.method !== 'GET' || url.origin !== self.location.origin) return
  if (request.mode === 'navigate') {
    if (url.pathname === shell) event.respondWith(page(request))
  } else if (files.includes(url.pathname)) {
    event.respondWith(file(request))
  }
})

async function page(request) {
  try {
    return await fetch(request, { signal: AbortSignal.timeout(patienceMs) })
  } catch (error) {
    const kept = await (await caches.open(cacheName)).match(shell)
    if (kept === undefined) throw error
    return kept
  }
}

/** Built files never change under their name. */
async function file(request) {
  const { pathname } = new URL(request.url)
  return await (await caches.open(cacheName)).match(pathname) ?? fetch(request)
}

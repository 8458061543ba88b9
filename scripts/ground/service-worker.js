// What: lets the pages open without a network. scripts/ground/pages.mjs puts the list of files and its hash into the first
// two lines. Must not: keep or answer anything under /api/, or throw away the files of a page that is still open.
const version = '__VERSION__';
const files = __FILES__;
const cacheName = `rampwell-${version}`;

// A new version waits until every page of the old one is closed (no skipWaiting): a session may be running in it, and the
// chunks that page has yet to load are in the old cache only.
self.addEventListener('install', (event) => {
  const requests = files.map((file) => new Request(file, { cache: 'reload' }));
  event.waitUntil(caches.open(cacheName).then((cache) => cache.addAll(requests)));
});

self.addEventListener('activate', (event) => {
  const clear = async () => {
    const names = await caches.keys();
    await Promise.all(
      names.filter((name) => name.startsWith('rampwell-') && name !== cacheName).map((name) => caches.delete(name)),
    );
    await self.clients.claim();
  };
  event.waitUntil(clear());
});

// A network that accepts and never answers is common on phones: after three seconds (own choice) the kept page is shown.
async function page(request) {
  const kept = () => caches.match('/index.html', { cacheName });
  const late = new Promise((resolve) => setTimeout(resolve, 3000)).then(kept);
  const fresh = fetch(request).catch(kept);
  return (await Promise.race([fresh, late])) ?? fresh;
}

self.addEventListener('fetch', (event) => {
  const { request } = event;
  const url = new URL(request.url);
  if (request.method !== 'GET' || url.origin !== self.location.origin || url.pathname.startsWith('/api/')) return;
  if (request.mode === 'navigate') event.respondWith(page(request));
  else if (files.includes(url.pathname)) {
    event.respondWith(caches.match(request, { cacheName }).then((kept) => kept ?? fetch(request)));
  }
});

// Keeps the page for use without a network. Cache first, and a newer version is
// taken only when the user accepts it.
//
// This is a pattern: `cargo task post-build` fills in the two constants and
// writes the result into the built page. VERSION is a hash over the contents of
// FILES; each file carries its own, so that a page fetched half old and half
// new is refused whole and tried again on the next visit.
const VERSION = "@VERSION@";
const FILES = {/* @FILES@ */};

// The scope is in the name: two copies on one host must not clear each other.
const PREFIX = "fallwright " + self.registration.scope + " ";
const CACHE = PREFIX + VERSION;

self.addEventListener("install", (event) => {
  event.waitUntil(
    (async () => {
      const cache = await caches.open(CACHE);
      try {
        await cache.addAll(
          Object.entries(FILES).map(
            ([file, integrity]) =>
              new Request(file, { cache: "reload", integrity }),
          ),
        );
      } catch (reason) {
        await caches.delete(CACHE);
        throw reason;
      }
    })(),
  );
});

self.addEventListener("activate", (event) => {
  event.waitUntil(
    (async () => {
      for (const name of await caches.keys()) {
        if (name.startsWith(PREFIX) && name !== CACHE) {
          await caches.delete(name);
        }
      }
      await self.clients.claim();
    })(),
  );
});

self.addEventListener("message", (event) => {
  if (event.data && event.data.type === "accept") {
    self.skipWaiting();
  }
});

self.addEventListener("fetch", (event) => {
  const request = event.request;
  if (
    request.method !== "GET" ||
    new URL(request.url).origin !== self.location.origin
  ) {
    return;
  }
  event.respondWith(
    (async () => {
      const cache = await caches.open(CACHE);
      const key = request.mode === "navigate" ? "./" : request;
      const kept = await cache.match(key, { ignoreSearch: true });
      return kept || fetch(request);
    })(),
  );
});

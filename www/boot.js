// Starts the page, and speaks for it when it cannot speak for itself.
//
// Plain JavaScript on purpose: a panic inside the WebAssembly module ends the
// module, so nothing here may need it. What the page and this file say to each
// other goes through the document:
//
// - <html lang>            set by the page; picks the language of the overlay
// - <html data-started>    set here once the module runs
// - <html data-offline>    "ready" once the page would open without a network
// - <html data-update>     "waiting" while a newer version waits; the event
//                          "fallwright-update" on window says so at the moment
// - "fallwright-accept"    dispatched on window by the page when the user takes
//                          the newer version; the page is then loaded again

const boot = document.getElementById("boot");
const root = document.documentElement;
let started = false;
let troubled = false;
let registration = null;

// A module of one function that uses two SIMD instructions (i8x16.splat and
// i8x16.popcnt).
const SIMD = new Uint8Array([
  0, 97, 115, 109, 1, 0, 0, 0, 1, 5, 1, 96, 0, 1, 123, 3, 2, 1, 0, 10, 10, 1,
  8, 0, 65, 0, 253, 15, 253, 98, 11,
]);

function canRun() {
  try {
    return typeof WebAssembly === "object" && WebAssembly.validate(SIMD);
  } catch {
    return false;
  }
}

// The stored books, newest first. Never creates or upgrades the database: that
// is the page's to do.
function storedBooks() {
  return new Promise((resolve) => {
    let request;
    try {
      request = indexedDB.open("fallwright");
    } catch {
      resolve([]);
      return;
    }
    request.onupgradeneeded = () => request.transaction.abort();
    request.onerror = () => resolve([]);
    request.onblocked = () => resolve([]);
    request.onsuccess = () => {
      const database = request.result;
      try {
        const all = database
          .transaction("books", "readonly")
          .objectStore("books")
          .getAll();
        all.onerror = () => resolve([]);
        all.onsuccess = () => {
          const when = (book) => new Date(book.changed).getTime() || 0;
          resolve(all.result.sort((a, b) => when(b) - when(a)));
          database.close();
        };
      } catch {
        database.close();
        resolve([]);
      }
    };
  });
}

function download(book) {
  const text =
    typeof book.json === "string" ? book.json : JSON.stringify(book.json);
  const link = document.createElement("a");
  link.href = URL.createObjectURL(
    new Blob([text], { type: "application/json" }),
  );
  const name = String(book.id).replace(/[^\p{L}\p{N}_-]+/gu, "-");
  link.download = "fallwright-" + name + ".json";
  const changed = new Date(book.changed);
  link.textContent =
    link.download +
    (Number.isNaN(changed.getTime()) ? "" : ", " + changed.toLocaleString());
  return link;
}

// Covers the page and says what happened: "stopped", "browser" or "loading".
async function show(what, detail) {
  console.error("fallwright:", what, detail);
  if (troubled) {
    return;
  }
  troubled = true;
  // The page is dead: nothing of it may be reached behind the overlay.
  const dead = document.querySelector(".app");
  if (dead) {
    dead.hidden = true;
  }
  const overlay = document.getElementById("trouble");
  const wanted = (root.lang || navigator.language || "en").slice(0, 2);
  const said = [...overlay.querySelectorAll("[lang]")];
  const part =
    said.find((one) => one.lang === wanted) ||
    said.find((one) => one.lang === "en");
  for (const words of part.querySelectorAll(`[data-say="${what}"]`)) {
    words.hidden = false;
  }
  part.querySelector("[data-detail]").textContent =
    String((detail && detail.stack) || detail) + "\n" + navigator.userAgent;
  part.querySelector("[data-do=again]").onclick = again;
  part.hidden = false;
  overlay.hidden = false;
  hideStarting();
  const list = part.querySelector("[data-list=books]");
  const books = await storedBooks();
  part.querySelector("[data-say=books]").hidden = books.length === 0;
  part.querySelector("[data-say=nobooks]").hidden = books.length !== 0;
  for (const book of books) {
    const item = document.createElement("li");
    item.append(download(book));
    list.append(item);
  }
  overlay.dataset.books = String(books.length);
}

// Loads the page again, taking a waiting newer version along: it may be the cure.
function again() {
  if (registration && registration.waiting) {
    accept();
  } else {
    location.reload();
  }
}

function hideStarting() {
  const starting = document.getElementById("starting");
  if (starting) {
    starting.remove();
  }
}

function accept() {
  if (!registration || !registration.waiting) {
    return;
  }
  navigator.serviceWorker.addEventListener(
    "controllerchange",
    () => location.reload(),
    { once: true },
  );
  registration.waiting.postMessage({ type: "accept" });
}

function tellUpdate() {
  root.dataset.update = "waiting";
  window.dispatchEvent(new CustomEvent("fallwright-update"));
}

async function keepOffline() {
  if (!("serviceWorker" in navigator)) {
    return;
  }
  try {
    registration = await navigator.serviceWorker.register("sw.js", {
      updateViaCache: "none",
    });
  } catch (reason) {
    // Without the server this fails, and the copy kept earlier goes on serving.
    console.info("fallwright: not kept for offline use:", String(reason));
    registration = (await navigator.serviceWorker.getRegistration()) || null;
  }
  if (!registration) {
    return;
  }
  if (registration.waiting && registration.active) {
    tellUpdate();
  }
  registration.addEventListener("updatefound", () => {
    const coming = registration.installing;
    coming.addEventListener("statechange", () => {
      if (coming.state === "installed" && registration.active) {
        tellUpdate();
      }
    });
  });
  await navigator.serviceWorker.ready;
  root.dataset.offline = "ready";
}

window.addEventListener("fallwright-accept", accept);
window.addEventListener("error", (event) => {
  // The browser reports a late layout this way; nothing has gone wrong.
  if (String(event.message).startsWith("ResizeObserver loop")) {
    return;
  }
  show(started ? "stopped" : "loading", event.error || event.message);
});
window.addEventListener("unhandledrejection", (event) => {
  show(started ? "stopped" : "loading", event.reason);
});

async function start() {
  if (!canRun()) {
    await show("browser", "WebAssembly SIMD is lacking");
    return;
  }
  try {
    const base = new URL(".", boot.src);
    const page = await import(new URL(boot.dataset.js, base).href);
    await page.default({
      module_or_path: new URL(boot.dataset.wasm, base),
    });
  } catch (reason) {
    await show("loading", reason);
    return;
  }
  started = true;
  root.dataset.started = "yes";
  hideStarting();
}

start();
keepOffline();

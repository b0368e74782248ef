/**
 * Runs in the page, before its own scripts: notes when what it looks at changes, and when a frame with that was made.
 * All times are milliseconds of `performance.now()`.
 */
(() => {
  const probe = { rowsAtMs: 0, inputAtMs: 0, listAtMs: 0, mapAtMs: 0, drawnAtMs: 0, arrivedAtMs: 0, frames: [], mapFrames: [] };
  globalThis.tailmarkProbe = probe;

  // What is queued in a frame runs after it was painted.
  const channel = new MessageChannel();
  const painted = [];
  channel.port1.onmessage = () => {
    for (const done of painted.splice(0)) done(performance.now());
  };
  function afterPaint(done) {
    painted.push(done);
    channel.port2.postMessage(0);
  }

  function watchFrames() {
    requestAnimationFrame((atMs) => {
      if (probe.rowsAtMs === 0 && document.querySelector("[data-row]")) afterPaint((ms) => (probe.rowsAtMs ||= ms));
      probe.frames.push(atMs);
      watchFrames();
    });
  }
  watchFrames();

  function watchList() {
    const note = (records) => {
      if (!records.some(({ target }) => target.parentElement?.closest("[role=table]"))) return;
      requestAnimationFrame(() => afterPaint((ms) => (probe.listAtMs = ms)));
    };
    new MutationObserver(note).observe(document.documentElement, { childList: true, subtree: true, characterData: true });
  }
  if (document.documentElement) watchList();
  else document.addEventListener("readystatechange", watchList, { once: true });

  for (const type of ["input", "click"]) {
    addEventListener(type, (event) => (probe.inputAtMs = event.timeStamp), { capture: true });
  }

  // A frame of the map shows changed features once new buffers were handed over.
  let isChanged = false;
  function wrap(prototype, name, before) {
    const original = prototype[name];
    prototype[name] = function (...given) {
      before();
      return original.apply(this, given);
    };
  }
  for (const name of ["bufferData", "bufferSubData"]) wrap(WebGL2RenderingContext.prototype, name, () => (isChanged = true));
  for (const name of ["drawElements", "drawArrays"]) {
    wrap(WebGL2RenderingContext.prototype, name, () => {
      const frame = probe.frames[probe.frames.length - 1];
      if (probe.mapFrames[probe.mapFrames.length - 1] !== frame) probe.mapFrames.push(frame);
      if (!isChanged) return;
      isChanged = false;
      afterPaint((ms) => (probe.mapAtMs = ms));
    });
  }

  const drawn = () => (probe.drawnAtMs = performance.now());
  for (const name of ["fillRect", "stroke", "fillText", "drawImage", "putImageData"]) wrap(CanvasRenderingContext2D.prototype, name, drawn);
  for (const name of ["arrayBuffer", "json"]) {
    const original = Response.prototype[name];
    Response.prototype[name] = async function () {
      const body = await original.call(this);
      if (this.url.includes("/api/legs/")) probe.arrivedAtMs = performance.now();
      return body;
    };
  }
})();

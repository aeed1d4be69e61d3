// The plainest offline app around the same core, to measure against: stock Pyodide, stock standard library.
const demo = await (await fetch("demo.json")).json();
const worker = new Worker("worker.js", { type: "module" });
worker.onmessage = ({ data }) => {
  document.getElementById("answer").textContent = JSON.parse(data).sheet.headline;
  window.answeredAt = performance.now();
};
worker.postMessage(JSON.stringify({ ask: "check", case: demo.case, units: null }));
await navigator.serviceWorker.register("sw.js");

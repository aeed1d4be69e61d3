self.onmessage = async ({ data }) => {
  const runtime = new URL("runtime/", self.location.href).href;
  const { loadPyodide } = await import(`${runtime}pyodide.mjs`);
  const pyodide = await loadPyodide({ indexURL: runtime });
  const core = await (await fetch("core.zip")).arrayBuffer();
  pyodide.unpackArchive(core, "zip");
  self.postMessage(pyodide.runPython("from headwater.answer import reply; reply")(data));
};

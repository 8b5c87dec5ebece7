// Read by every Node that knows modules: no newer syntax here, and no imports.

/** Ends the process with a message when this Node is older than the one package.json asks for. */
export function requireNode() {
  const [major, minor] = process.versions.node.split('.').map(Number);
  if (major > 20 || (major === 20 && minor >= 19)) return;
  console.error(`Foreveil needs Node 20.19 or newer; this is ${process.versions.node}. See https://nodejs.org or your system's packages.`);
  process.exit(1);
}

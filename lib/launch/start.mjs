/*
 * npm start. Plain Node without packages, since it is what installs them. This file only looks at Node's own version, so that an old one gets
 * a sentence instead of a syntax error from the rest.
 */
const [major = 0, minor = 0] = process.versions.node.split('.').map(Number)
if (major < 20 || (major === 20 && minor < 9)) {
  process.stderr.write(`Polewright needs Node.js 20.9 or newer, and this is ${process.versions.node}.\n`)
  process.exit(1)
}
const { launch } = await import('./launch.mjs')
await launch()

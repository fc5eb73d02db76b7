import { PlainFailure } from './plainFailure.mjs'

const oldest = [20, 19]

/**
 * Refuses a Node that cannot run the program; a newer one than it is tested with is only mentioned.
 * @param {string} version as in process.versions.node
 */
export function checkNode(version) {
  const [major = 0, minor = 0] = version.split('.').map(Number)
  if (major < oldest[0] || (major === oldest[0] && minor < oldest[1])) {
    throw new PlainFailure(`Offing needs Node ${oldest.join('.')} or a newer 20.x; this is Node ${version}.`)
  }
  if (major > oldest[0]) console.log(`Node ${version}: Offing is tested with Node 20.`)
}

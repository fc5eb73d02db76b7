/** `npm test`: every check of the house, from a bare clone. Runs before any package is installed. */
import { checkNode } from './checkNode.mjs'
import { giveUp } from './plainFailure.mjs'
import { checkDataFolder, prepare, root } from './prepare.mjs'

try {
  checkNode(process.versions.node)
  await checkDataFolder()
  await prepare({ chromium: true, ownDatabase: true })
  const { register } = await import('tsx/esm/api')
  register()
  const { runTests } = await import('./runTests.ts')
  process.exit(await runTests(root))
} catch (error) {
  giveUp(error)
}

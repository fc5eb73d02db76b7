/** `npm test`: every check of the house, from a bare clone. Runs before any package is installed. */
import { checkNode } from './checkNode.mjs'
import { debianNeeds } from './debianPackages.mjs'
import { giveUp } from './plainFailure.mjs'
import { bringPackages, bringPrograms, checkDataFolder, root } from './prepare.mjs'

try {
  checkNode(process.versions.node)
  await checkDataFolder()
  const needs = Object.values(debianNeeds)
  await Promise.all([bringPackages(), bringPrograms({ needs, ownDatabase: false })])
  const { register } = await import('tsx/esm/api')
  register()
  const { runTests } = await import('./runTests.ts')
  process.exit(await runTests(root))
} catch (error) {
  giveUp(error)
}

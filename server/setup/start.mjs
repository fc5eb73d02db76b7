/** `npm start`: the demonstration, from a bare clone to a live page. Runs before any package is installed. */
import { checkNode } from './checkNode.mjs'
import { debianNeeds } from './debianPackages.mjs'
import { holdFolder } from './folderLock.mjs'
import { giveUp } from './plainFailure.mjs'
import { bringPackages, bringPrograms, checkDataFolder, dataFolder, packagesUnless } from './prepare.mjs'

try {
  checkNode(process.versions.node)
  await checkDataFolder()
  await holdFolder(dataFolder)
  const ownDatabase = !process.env.DATABASE_URL
  const programs = bringPrograms({ needs: ownDatabase ? [debianNeeds.mariadb] : [], ownDatabase })
  await packagesUnless(bringPackages(), programs)
  const { register } = await import('tsx/esm/api')
  register()
  const { startDemonstration } = await import('./start.ts')
  await startDemonstration(programs)
} catch (error) {
  giveUp(error)
}

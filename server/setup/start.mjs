/** `npm start`: the demonstration, from a bare clone to a live page. Runs before any package is installed. */
import { checkNode } from './checkNode.mjs'
import { holdFolder } from './folderLock.mjs'
import { giveUp } from './plainFailure.mjs'
import { checkDataFolder, dataFolder, prepare } from './prepare.mjs'

try {
  checkNode(process.versions.node)
  await checkDataFolder()
  await holdFolder(dataFolder)
  await prepare({ chromium: false, ownDatabase: !process.env.DATABASE_URL })
  const { register } = await import('tsx/esm/api')
  register()
  const { startDemonstration } = await import('./start.ts')
  await startDemonstration()
} catch (error) {
  giveUp(error)
}

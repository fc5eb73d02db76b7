/** `npm run build`: the client, whether it is stale or not. */
import { buildClient, fingerprintOfSources } from './clientBuild.ts'
import { giveUp } from './plainFailure.mjs'
import { root } from './prepare.mjs'

try {
  await buildClient(root, await fingerprintOfSources(root))
} catch (error) {
  giveUp(error)
}

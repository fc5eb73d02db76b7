/** What a worker thread starts with: plain JavaScript, so that it runs whatever the process was started with. */
import { workerData } from 'node:worker_threads'
import { register } from 'tsx/esm/api'

register()
await import(workerData.program)

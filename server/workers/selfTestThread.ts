/** A worker thread that runs the self-test, answers what failed, and ends. */
import { parentPort } from 'node:worker_threads'
import { selfChecks } from '../../shared/waves/selfTest.ts'
import { faultsOf } from './selfTest.ts'

parentPort?.postMessage(faultsOf(selfChecks))

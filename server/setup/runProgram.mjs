import { spawn } from 'node:child_process'

const tailLength = 40

/**
 * Runs a program to its end and keeps the last lines of what it said.
 * @param {string} command
 * @param {string[]} args
 * @param {{ cwd?: string, env?: NodeJS.ProcessEnv, onLine?: (line: string) => void }} [options]
 * @returns {Promise<{ code: number, tail: string }>} 127 when the program is not there
 */
export function runProgram(command, args, options = {}) {
  return new Promise((resolve) => {
    /** @type {string[]} */
    const lines = []
    const child = spawn(command, args, { cwd: options.cwd, env: options.env, stdio: ['ignore', 'pipe', 'pipe'] })
    for (const stream of [child.stdout, child.stderr]) {
      let rest = ''
      stream.setEncoding('utf8')
      stream.on('data', (text) => {
        const parts = (rest + text).split(/\r?\n/)
        rest = parts.pop() ?? ''
        for (const line of parts) hear(line)
      })
      stream.on('end', () => rest && hear(rest))
    }
    /** @param {string} line */
    function hear(line) {
      lines.push(line)
      if (lines.length > tailLength) lines.shift()
      options.onLine?.(line)
    }
    // Whoever ends before the program takes it along.
    const takeAlong = () => child.kill()
    process.once('exit', takeAlong)
    /** @param {{ code: number, tail: string }} end */
    const over = (end) => {
      process.off('exit', takeAlong)
      resolve(end)
    }
    child.on('error', (error) => over({ code: 127, tail: error.message }))
    child.on('close', (code) => over({ code: code ?? 1, tail: lines.join('\n') }))
  })
}

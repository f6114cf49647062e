/** Runs a program to its end; the scripts' only way to do so. */
import { spawn } from 'node:child_process'
import { ROOT } from './paths.mjs'

/** Resolves with the exit code and what was captured (`all`, or `stdout` while the rest shows); never rejects for a failing program. */
export function run(program, args, { env = {}, capture = 'none' } = {}) {
  return new Promise((resolve) => {
    const child = spawn(program, args, {
      cwd: ROOT,
      env: { ...process.env, ...env },
      stdio: ['ignore', capture === 'none' ? 'inherit' : 'pipe', capture === 'all' ? 'pipe' : 'inherit'],
    })
    let output = ''
    child.stdout?.on('data', (chunk) => (output += chunk))
    child.stderr?.on('data', (chunk) => (output += chunk))
    child.on('error', (error) => resolve({ code: 127, output: `${output}${error.message}` }))
    child.on('close', (code, signal) => resolve({ code: code ?? (signal ? 1 : 0), output }))
  })
}

/** Runs one of the project's own tools by Node, without a shell or npx between. */
export const runTool = (name, args, options) => run(process.execPath, [`node_modules/${name}`, ...args], options)

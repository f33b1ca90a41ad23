import { execFileSync } from 'node:child_process'
import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'

const strict = ['-std=c99', '-Wall', '-Wextra', '-Werror', '-pedantic']

/** Compiles one C file beside these headers, without a single warning, and runs it; every line that it prints. */
export function compileAndRun(
  headers: ReadonlyMap<string, string>,
  main: string,
  optimise: '-O0' | '-O1',
  more: readonly string[] = [],
): string[] {
  const folder = mkdtempSync(join(tmpdir(), 'polewright-c-'))
  try {
    for (const [name, text] of headers) writeFileSync(join(folder, name), text)
    writeFileSync(join(folder, 'main.c'), main)
    mkdirSync(join(folder, 'out'))
    const program = join(folder, 'out', 'main')
    // -ffp-contract=off is what -std=c99 means on GCC; Clang has to be told.
    execFileSync('cc', [...strict, '-ffp-contract=off', optimise, '-o', program, 'main.c', ...more], {
      cwd: folder,
      stdio: 'pipe',
    })
    return execFileSync(program, { maxBuffer: 1 << 28 })
      .toString()
      .split('\n')
      .filter(Boolean)
  } finally {
    rmSync(folder, { recursive: true, force: true })
  }
}

/** A double from the sixteen hexadecimal digits of its bits. */
export function doubleFromBits(digits: string): number {
  const view = new DataView(new ArrayBuffer(8))
  view.setBigUint64(0, BigInt(`0x${digits}`))
  return view.getFloat64(0)
}

import { existsSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { gzipSync } from 'node:zlib'

/** kB of 1000 bytes, gzipped. */
export interface ScriptSize {
  page: string
  files: number
  scriptKb: number
  styleKb: number
}

/** The parts of the build's manifest that say what a file loads with it. */
interface Chunk {
  file: string
  imports?: string[]
  css?: string[]
}

/** What the browser has fetched when the page stands: the entry, the page's own chunk, and all they import at once. */
export function scriptSizes(webDist: string): ScriptSize[] {
  const file = join(webDist, '.vite', 'manifest.json')
  if (!existsSync(file))
    throw new Error('The web build wrote no manifest (build.manifest in web/vite.config.ts).')
  const manifest = JSON.parse(readFileSync(file, 'utf8')) as Record<string, Chunk>
  return [
    sizeOf('Sign-in page', ['index.html', 'src/pages/door/sign-in-page.tsx']),
    sizeOf('Today', ['index.html', 'src/pages/today/today-page.tsx']),
  ]

  function sizeOf(page: string, entries: readonly string[]): ScriptSize {
    const scripts = new Set<string>()
    const styles = new Set<string>()
    const walk = (key: string) => {
      const chunk = manifest[key]
      if (!chunk) throw new Error(`The build has no chunk ${key}.`)
      if (scripts.has(chunk.file)) return
      scripts.add(chunk.file)
      for (const style of chunk.css ?? []) styles.add(style)
      chunk.imports?.forEach(walk)
    }
    entries.forEach(walk)
    return { page, files: scripts.size, scriptKb: gzipped(scripts), styleKb: gzipped(styles) }
  }

  function gzipped(files: ReadonlySet<string>): number {
    const bytes = [...files].map((name) => gzipSync(readFileSync(join(webDist, name)), { level: 9 }).length)
    return bytes.reduce((sum, one) => sum + one, 0) / 1000
  }
}

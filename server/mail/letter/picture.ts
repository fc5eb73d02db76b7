/** Drawings as PNG, twice their size for sharp screens: e-mail programs show no SVG. */
import { readFile } from 'node:fs/promises'
import { createRequire } from 'node:module'
import { initWasm, Resvg } from '@resvg/resvg-wasm'

const wasmFile = createRequire(import.meta.url).resolve('@resvg/resvg-wasm/index_bg.wasm')
let ready: Promise<void> | null = null

/** All who are told of an alert get the same drawings: the newest ones are kept. */
const drawn = new Map<string, Promise<Buffer>>()
const mostKept = 40

export function pngOf(svg: string): Promise<Buffer> {
  const known = drawn.get(svg)
  if (known) return known
  const png = draw(svg)
  png.catch(() => drawn.delete(svg))
  drawn.set(svg, png)
  const [oldest] = drawn.keys()
  if (drawn.size > mostKept && oldest !== undefined) drawn.delete(oldest)
  return png
}

async function draw(svg: string): Promise<Buffer> {
  await (ready ??= readFile(wasmFile).then((wasm) => initWasm(wasm)))
  const resvg = new Resvg(svg, { fitTo: { mode: 'zoom', value: 2 }, font: { loadSystemFonts: false } })
  try {
    const image = resvg.render()
    const png = Buffer.from(image.asPng())
    image.free()
    return png
  } finally {
    resvg.free()
  }
}

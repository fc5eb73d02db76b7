/** Drawings as PNG, twice their size for sharp screens: e-mail programs show no SVG. */
import { readFile } from 'node:fs/promises'
import { createRequire } from 'node:module'
import { initWasm, Resvg } from '@resvg/resvg-wasm'

const wasmFile = createRequire(import.meta.url).resolve('@resvg/resvg-wasm/index_bg.wasm')
let ready: Promise<void> | null = null

export async function pngOf(svg: string): Promise<Buffer> {
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

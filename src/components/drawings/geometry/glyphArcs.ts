/** How a height shows in the glyph: one crest arc for each metre begun, one solid block above three metres. */
export type GlyphCrests = { block: true } | { block: false; arcs: number }

export function glyphCrests(heightMetres: number): GlyphCrests {
  if (heightMetres > 3) return { block: true }
  return { block: false, arcs: Math.max(1, Math.ceil(heightMetres - 0.001)) }
}

/** The day strip as a PNG for letters, with its sentence for the alternative text. */
import sharp from 'sharp'
import { dayStrip, dayStripSvg } from './day-strip.ts'
import { ZINC } from './palette.ts'
import type { StripDay } from './types.ts'

/** Letters are read on dense screens. */
const SCALE = 2
const DEFAULT_DPI = 72

export async function dayStripPng(day: StripDay, widthPx: number): Promise<{ readonly base64: string; readonly sentence: string }> {
  const svg = dayStripSvg(day, { widthPx, colours: ZINC, labels: true, role: 'decoration' })
  const png = await sharp(Buffer.from(svg), { density: DEFAULT_DPI * SCALE })
    .flatten({ background: ZINC.sheet })
    .png()
    .toBuffer()
  return { base64: png.toString('base64'), sentence: dayStrip(day, widthPx).sentence }
}

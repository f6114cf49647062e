/** The digest as a letter to one owner: the month in figures, its chart inline with the same said in a sentence. */
import sharp from 'sharp'
import type { DigestFigures } from '#db/queries/digest.ts'
import { processConfig } from '#lib/config.server.ts'
import { zoneCity } from '#lib/format.ts'
import { letter } from '#lib/mail/letter.ts'
import type { Unsubscribe } from '#lib/mail/unsubscribe.server.ts'
import { type ChartColours, chartSentence, energyChartSvg } from './chart.ts'
import { digestView, monthName } from './view.ts'

/** Mail has no custom properties: the zinc set as literals. */
const ZINC: ChartColours = {
  ink: '#12262e',
  soft: '#4d6068',
  rule: '#c1ccd1',
  copper: '#a8481f',
  verdigris: '#146b5c',
  crimson: '#a3123a',
  dusk: '#56468f',
  sheet: '#f7f9fa',
}
const CHART_PX = 512
const DENSITY = 144

/** The month's chart as it goes into every owner's letter; drawn once. */
export async function digestChart(figures: DigestFigures): Promise<string> {
  const svg = Buffer.from(energyChartSvg(figures, ZINC))
  return (await sharp(svg, { density: DENSITY }).png().toBuffer()).toString('base64')
}

export interface DigestLetterCase {
  readonly figures: DigestFigures
  readonly month: string
  readonly zone: string
  readonly reason: string | null
  /** Of the digest's page. */
  readonly path: string
  readonly chartBase64: string
  readonly unsubscribe: Unsubscribe
}

export function digestLetter({ figures, month, zone, reason, path, chartBase64, unsubscribe }: DigestLetterCase) {
  const view = digestView(figures, month)
  const title = `${figures.propertyName}, ${monthName(month)}: ${view.headline}`
  const { text, html } = letter({
    title,
    paragraphs: [...(reason ? [`A new edition, because: ${reason}`] : []), view.readiness, view.saving, ...view.paragraphs],
    figures: view.lines,
    image: { contentId: 'energy-by-day', alt: chartSentence(figures), widthPx: CHART_PX },
    actions: [{ label: 'Open the page', url: `${processConfig().baseUrl}${path}` }],
    footer: [
      `You get this page once a month because you own this building. Its days are local (${zoneCity(zone)}).`,
      'Dwellhour screens; it does not certify.',
      unsubscribe.footer,
    ],
  })
  return {
    subject: `Read ${monthName(month)} of ${figures.propertyName}: ${view.headline}`,
    text,
    html,
    headers: unsubscribe.headers,
    secrets: [unsubscribe.secret],
    attachments: [{ contentId: 'energy-by-day', filename: 'energy.png', contentType: 'image/png', base64: chartBase64 }],
  }
}

/** The digest as a letter: the month in figures, its chart inline with the same said in a sentence. */
import sharp from 'sharp'
import type { DigestFigures } from '#db/queries/digest.ts'
import { processConfig } from '#lib/config.server.ts'
import { letter } from '#lib/mail/letter.ts'
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

export async function digestLetter({
  figures,
  month,
  reason,
  path,
}: {
  readonly figures: DigestFigures
  readonly month: string
  readonly reason: string | null
  /** Of the digest's page. */
  readonly path: string
}) {
  const view = digestView(figures, month)
  const title = `${figures.propertyName}, ${monthName(month)}: ${view.headline}`
  const png = await sharp(Buffer.from(energyChartSvg(figures, ZINC)), { density: DENSITY })
    .png()
    .toBuffer()
  const { text, html } = letter({
    title,
    paragraphs: [...(reason ? [`A new edition, because: ${reason}`] : []), view.readiness, view.saving, ...view.paragraphs],
    figures: view.lines,
    image: { contentId: 'energy-by-day', alt: chartSentence(figures), widthPx: CHART_PX },
    actions: [{ label: 'Open the page', url: `${processConfig().baseUrl}${path}` }],
    footer: ['You get this page once a month because you own this building.', 'Dwellhour screens; it does not certify.'],
  })
  return {
    subject: title,
    text,
    html,
    attachments: [{ contentId: 'energy-by-day', filename: 'energy.png', contentType: 'image/png', base64: png.toString('base64') }],
  }
}

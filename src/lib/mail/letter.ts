/** The one look of all mail: a plain text part and an HTML part of the same words, no remote content, inline figures by content id. */

export interface LetterParts {
  readonly title: string
  readonly paragraphs: readonly string[]
  /** Headed lists of things, each with where it is seen. */
  readonly lists?: readonly { readonly heading: string; readonly items: readonly { readonly text: string; readonly url: string }[] }[]
  /** A line of figures, label and value. */
  readonly figures?: readonly (readonly [label: string, value: string])[]
  readonly image?: { readonly contentId: string; readonly alt: string; readonly widthPx: number }
  readonly actions?: readonly { readonly label: string; readonly url: string }[]
  readonly footer: readonly string[]
}

/** Mail programs ignore style sheets and custom properties, so the zinc set stands here as literals. */
const COLOUR = { ink: '#12262e', soft: '#4d6068', rule: '#c1ccd1', sheet: '#f7f9fa', copper: '#a8481f' }

export function letter(parts: LetterParts): { readonly text: string; readonly html: string } {
  return { text: asText(parts), html: asHtml(parts) }
}

function asText({ title, paragraphs, lists = [], figures = [], image, actions = [], footer }: LetterParts): string {
  const blocks = [
    title,
    ...paragraphs,
    ...lists.map(({ heading, items }) => [heading, ...items.map((item) => `- ${item.text}\n  ${item.url}`)].join('\n')),
    figures.map(([label, value]) => `${label}: ${value}`).join('\n'),
    image?.alt ?? '',
    ...actions.map((action) => `${action.label}: ${action.url}`),
    `--\n${['Dwellhour', ...footer].join('\n')}`,
  ]
  return `${blocks.filter((block) => block !== '').join('\n\n')}\n`
}

function asHtml({ title, paragraphs, lists = [], figures = [], image, actions = [], footer }: LetterParts): string {
  const p = (text: string) => `<p style="margin:0 0 14px">${escapeHtml(text)}</p>`
  const rows = figures.map(
    ([label, value]) =>
      `<tr><td style="padding:6px 16px 6px 0;border-bottom:1px solid ${COLOUR.rule}">${escapeHtml(label)}</td><td style="padding:6px 0;border-bottom:1px solid ${COLOUR.rule};font-weight:bold">${escapeHtml(value)}</td></tr>`,
  )
  const listed = lists.map(({ heading, items }) => {
    const rows = items.map(
      ({ text, url }) => `<li style="margin:0 0 8px"><a href="${escapeHtml(url)}" style="color:${COLOUR.ink}">${escapeHtml(text)}</a></li>`,
    )
    return `<h2 style="margin:0 0 8px;font-size:16px;font-weight:bold">${escapeHtml(heading)}</h2><ul style="margin:0 0 18px;padding:0 0 0 20px">${rows.join('')}</ul>`
  })
  const links = actions.map(
    (action) =>
      `<a href="${escapeHtml(action.url)}" style="display:inline-block;margin:0 10px 10px 0;padding:12px 18px;border:2px solid ${COLOUR.ink};color:${COLOUR.ink};font-weight:bold;text-decoration:none">${escapeHtml(action.label)}</a>`,
  )
  return `<!doctype html><html lang="en"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width"><title>${escapeHtml(title)}</title></head>
<body style="margin:0;background:${COLOUR.sheet};color:${COLOUR.ink};font:16px/1.45 Lato,'Helvetica Neue',Arial,sans-serif">
<div style="max-width:560px;margin:0 auto;padding:24px">
<p style="margin:0 0 20px;font-weight:900">Dwell<span style="color:${COLOUR.copper}">hour</span></p>
<h1 style="margin:0 0 16px;font-size:26px;line-height:1.2;font-weight:300">${escapeHtml(title)}</h1>
${paragraphs.map(p).join('\n')}
${listed.join('\n')}
${rows.length > 0 ? `<table style="border-collapse:collapse;margin:0 0 18px">${rows.join('')}</table>` : ''}
${image ? `<p style="margin:0 0 18px"><img src="cid:${image.contentId}" alt="${escapeHtml(image.alt)}" width="${image.widthPx}" style="max-width:100%;height:auto"></p>` : ''}
<p style="margin:0 0 8px">${links.join('')}</p>
<p style="margin:24px 0 0;padding-top:12px;border-top:1px solid ${COLOUR.rule};color:${COLOUR.soft};font-size:13px">${footer.map(escapeHtml).join('<br>')}</p>
</div></body></html>`
}

export const escapeHtml = (text: string): string =>
  text.replaceAll('&', '&amp;').replaceAll('<', '&lt;').replaceAll('>', '&gt;').replaceAll('"', '&quot;').replaceAll("'", '&#39;')

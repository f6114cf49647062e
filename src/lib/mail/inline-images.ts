/** Shows a letter's inline images outside a mail program: `cid:` references become the images themselves. */
export interface InlineImage {
  readonly contentId: string
  readonly contentType: string
  readonly base64: string
}

export const withInlineImages = (html: string, images: readonly InlineImage[]): string =>
  images.reduce(
    (text, { contentId, contentType, base64 }) => text.replaceAll(`cid:${contentId}`, `data:${contentType};base64,${base64}`),
    html,
  )

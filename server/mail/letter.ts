/** What a letter says; text and HTML are made of the same parts. */
export interface LetterContent {
  subject: string
  paragraphs: string[]
  /** one thing to do; its address stands in the letter as it is */
  action?: { label: string, url: string }
  /** why it came, and what to do if it should not have */
  footer: string
}

/** The plain text, lines unbroken: mail programs wrap them. */
export function letterText({ paragraphs, action, footer }: LetterContent): string {
  return [...paragraphs, ...action ? [`${action.label}:\n${action.url}`] : [], `-- \n${footer}`].join('\n\n')
}

/** Plain HTML without pictures, fonts or scripts from anywhere. */
export function letterHtml({ subject, paragraphs, action, footer }: LetterContent): string {
  const parts = [
    ...paragraphs.map(text => `<p>${escaped(text)}</p>`),
    ...action ? [`<p><a href="${escaped(action.url)}" style="color:#17365D;font-weight:600">${escaped(action.label)}</a></p><p style="color:#555">${escaped(action.url)}</p>`] : [],
    `<p style="color:#555;border-top:1px solid #ccc;padding-top:12px">${escaped(footer)}</p>`,
  ]
  return `<!doctype html><html lang="en"><head><meta charset="utf-8"><title>${escaped(subject)}</title></head>`
    + `<body style="font-family:sans-serif;line-height:1.5;color:#1F2328;background:#F6F1E6;padding:24px"><div style="max-width:560px">${parts.join('')}</div></body></html>`
}

const entities: Record<string, string> = { '&': '&amp;', '<': '&lt;', '>': '&gt;', '"': '&quot;' }
const escaped = (text: string): string => text.replace(/[&<>"]/g, character => entities[character]!)

/** The files in a drop or a paste; a screenshot on the clipboard has no name of its own, so it gets one with the hour. */
export function filesOf(transfer: DataTransfer | null, now = new Date()): File[] {
  const files = [...transfer?.files ?? []]
  return files.map(file => file.name === 'image.png' ? new File([file], `Pasted ${clock(now)}.png`, { type: file.type }) : file)
}

const clock = (now: Date) => `${String(now.getHours()).padStart(2, '0')}.${String(now.getMinutes()).padStart(2, '0')}`

/** Whether a drag carries files at all; text and links are let pass. */
export const carriesFiles = (transfer: DataTransfer | null) => transfer?.types.includes('Files') ?? false

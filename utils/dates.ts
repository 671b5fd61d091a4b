const format = (options: Intl.DateTimeFormatOptions) => {
  const formatter = new Intl.DateTimeFormat('en', options)
  return (instant: string): string => formatter.format(new Date(instant))
}

/** How the screens write an instant (ISO 8601), in the reader's own time zone. */
export const longDate = format({ dateStyle: 'long' })
export const mediumDate = format({ dateStyle: 'medium' })
export const dateAndTime = format({ dateStyle: 'medium', timeStyle: 'short' })

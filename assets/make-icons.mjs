// Makes the icons of the home screen from the mark: node assets/make-icons.mjs
// The maskable one keeps the mark within the middle 80 %, which no mask cuts (W3C Web Application Manifest, “icon masks and safe zone”).
import sharp from 'sharp'

const paper = '#F6F1E6'
const mark = side => sharp('public/mark.svg', { density: 72 * side / 28 }).resize(side, side).png({ compressionLevel: 9 })

async function onPaper(side, markSide, path) {
  const ground = sharp({ create: { width: side, height: side, channels: 3, background: paper } })
  await ground.composite([{ input: await mark(markSide).toBuffer(), gravity: 'centre' }]).png({ compressionLevel: 9 }).toFile(path)
}

await mark(192).toFile('public/icons/mark-192.png')
await mark(512).toFile('public/icons/mark-512.png')
await onPaper(512, 280, 'public/icons/mark-maskable-512.png')
await onPaper(180, 120, 'public/icons/apple-touch-icon.png')

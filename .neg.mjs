import { chromium } from 'playwright-core'
import { readFileSync } from 'node:fs'
const s=JSON.parse(readFileSync('/tmp/f1/state.json'))
const cookie=s.cookies.map(c=>c.name+'='+c.value).join('; ')
const items=(await (await fetch('http://127.0.0.1:4500/api/studios/rope-works/negatives',{headers:{cookie}})).json()).items
const id=items[0].id
const b = await chromium.launch({ executablePath: '/usr/bin/chromium', args: ['--no-sandbox','--disable-gpu','--disable-quic','--no-first-run','--disable-background-networking','--disable-component-update','--disable-sync'] })
for (const [w,h,theme] of JSON.parse(process.env.SETS ?? '[[1440,900,"light"],[390,844,"light"],[1440,900,"dim"],[390,844,"dim"]]')) {
const c = await b.newContext({ viewport: { width: w, height: h }, baseURL: 'http://127.0.0.1:4500', hasTouch: w < 700, isMobile: w < 700, storageState: '/tmp/f1/state.json' })
await c.addInitScript(t => localStorage.setItem('emulside-theme', t), theme)
const p = await c.newPage()
p.setDefaultTimeout(60000)
p.on('console', m => ['error','warning'].includes(m.type()) && !/VUE_ROUTER/.test(m.text()) && console.log('console', m.type(), m.text().slice(0, 400)))
p.on('pageerror', e => console.log('pageerror', e.stack.slice(0, 600)))
const shot = n => p.screenshot({ path: `/tmp/f1/g-${w}-${theme}-${n}.png` })
await p.goto('/s/rope-works/negatives/'+id)
if (w > 700) {
  await p.getByText('Every tone holds').or(p.getByText(/prints as/)).filter({visible:true}).first().waitFor()
  await p.waitForTimeout(1500)
  await p.mouse.move(w*0.28, 320); await p.waitForTimeout(400)
  await shot('a')
  for (const [name, label] of [['size','Change the print size'],['film','Film: fineness, margin, marks'],['mix','Grey mix'],['bench','Change the bench'],['crop','Turn and straighten'],['aim','Compare aims']]) {
    await p.getByRole('button', { name: label }).click(); await p.waitForTimeout(name === 'aim' ? 3500 : 1200); await shot(name); await p.keyboard.press('Escape'); await p.waitForTimeout(200)
  }
  await p.getByRole('button', { name: 'Download film' }).click(); await p.waitForTimeout(1500); await shot('files')
  await p.keyboard.press('Escape')
} else {
  await p.getByRole('button', { name: /^Tones/ }).waitFor(); await p.waitForTimeout(3000)
  await shot('photo')
  await p.getByRole('button', { name: /^Tones/ }).click(); await p.waitForTimeout(300); await shot('tones')
  await p.getByRole('button', { name: 'Film', exact: true }).click(); await p.waitForTimeout(800); await shot('film')
  await p.getByRole('button', { name: /^Print size/ }).click(); await p.waitForTimeout(300); await p.mouse.wheel(0,500); await p.waitForTimeout(300); await shot('size')
  await p.getByRole('button', { name: 'Print', exact: true }).click(); await p.waitForTimeout(800); await shot('print')
  await p.getByRole('button', { name: 'Download film' }).click(); await p.waitForTimeout(1500); await shot('files')
}
await c.close()
}
await b.close()

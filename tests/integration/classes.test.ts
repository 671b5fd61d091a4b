import { execFile } from 'node:child_process'
import { createHash, randomUUID } from 'node:crypto'
import { existsSync, readFileSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { promisify } from 'node:util'
import { describe, expect, it, vi } from 'vitest'
import { inDays, newClass, newClassWithStudent, newStudent } from '../support/classes'
import { sql } from '../support/database'
import { listen } from '../support/hints'
import { newFolder } from '../support/house'
import { letterTo, newInvitation, secretIn } from '../support/letters'
import { filmOf, newNegative, newPhoto } from '../support/negatives'
import { ownInstallation } from '../support/own-installation'
import { newPersonIn } from '../support/people'
import { newPicture, uploadForm } from '../support/pictures'
import { Agent, newStudio } from '../support/studio'

const run = async (program: string, ...args: string[]) => (await promisify(execFile)(program, args)).stdout
const codeOf = (answer: { body: { data: { code: string } } }) => answer.body.data.code
const endClass = (id: string, daysAgo: number) => sql('update classes set ends_at = now() - make_interval(days => $2) where id = $1', [id, daysAgo])

describe('joining a class', () => {
  it('takes a first name and nothing else, and gives a session as a member while the class lasts', async () => {
    const teacher = await newStudio('Weir House')
    const open = await newClass(teacher)
    const look = await new Agent().post('/api/join/look', { roomCode: `${open.roomCode.slice(0, 4).toLowerCase()} ${open.roomCode.slice(4)}` })
    expect(look.body).toMatchObject({ className: 'Blue afternoon', studioName: 'Weir House' })
    const { agent, id, personalCode } = await newStudent(open)
    expect((await agent.get('/api/me')).body).toEqual({
      user: { id, name: 'Mika', email: null },
      studios: [{ id: teacher.ids.studio, slug: teacher.studio.slug, name: 'Weir House', role: 'member', class: { id: open.id, name: 'Blue afternoon', endsAt: look.body.endsAt, takeAlongUntil: look.body.takeAlongUntil, isOver: false } }],
    })
    const [row] = await sql('select u.*, s.* from users u join class_students s on s.id = u.id where u.id = $1', [id])
    expect(row).toMatchObject({ name: 'Mika', email: null, password_hash: null })
    expect(JSON.stringify(row)).not.toContain(personalCode)
  })

  it('tells equal first names apart, also of those who join at once', async () => {
    const open = await newClass(await newStudio())
    const students = await Promise.all(['Mika', 'mika', 'Mika', 'Ada'].map(name => newStudent(open, name)))
    expect(students.map(student => student.name.toLowerCase()).sort()).toEqual(['ada', 'mika', 'mika 2', 'mika 3'])
    expect((await newStudent(await newClass(await newStudio()))).name).toBe('Mika')
  })

  it('is over when the door is closed, the code renewed or the class ended: such codes say no more than wrong ones', async () => {
    const { teacher, open, board } = await newClassWithStudent()
    const attempt = async (roomCode: string) => (await new Agent().post('/api/join', { roomCode, firstName: 'Ada' }))
    const wrong = (await attempt('CFHJKMNP')).text
    await teacher.agent.patch(board, { revision: 1, joiningOpen: false })
    expect((await attempt(open.roomCode)).text).toBe(wrong)
    await teacher.agent.patch(board, { revision: 2, joiningOpen: true })
    const renewed = (await teacher.agent.post(`${board}/room-code`)).body
    expect(renewed.joinUrl).toBe(`${teacher.agent.address}/join#${renewed.roomCode}`)
    expect((await attempt(open.roomCode)).text).toBe(wrong)
    expect((await attempt(renewed.roomCode)).status).toBe(201)
    await teacher.agent.patch(board, { revision: 4, endsAt: 'now' })
    expect((await attempt(renewed.roomCode)).text).toBe(wrong)
  })
})

describe('a personal code', () => {
  it('brings a student back on another phone, until the teacher makes a new one', async () => {
    const { teacher, student, board } = await newClassWithStudent()
    const { id } = await newPhoto(student)
    const phone = new Agent()
    const back = await phone.post('/api/join/return', { personalCode: student.personalCode.toLowerCase() })
    expect(back.body.user).toEqual({ id: student.id, name: 'Mika', email: null })
    expect((await phone.get(`${student.root}/photos/${id}`)).status).toBe(200)
    const { personalCode } = (await teacher.agent.post(`${board}/students/${student.id}/personal-code`)).body
    for (const agent of [phone, student.agent]) expect((await agent.get('/api/me')).status).toBe(401)
    expect(codeOf(await new Agent().post('/api/join/return', { personalCode: student.personalCode }))).toBe('link_void')
    expect((await phone.post('/api/join/return', { personalCode })).status).toBe(200)
  })
})

describe('what students see', () => {
  it('is not one another, and not the board', async () => {
    const { teacher, open, student, board } = await newClassWithStudent()
    const other = await newStudent(open, 'Ada')
    const member = await newPersonIn(teacher.ids.studio, 'member')
    const { id } = await newPhoto(other)
    const ids = (answer: { body: { items: { id: string }[] } }) => answer.body.items.map(one => one.id).sort()
    expect(ids(await student.agent.get(`${student.root}/people`))).toEqual([teacher.ids.user, student.id].sort())
    expect(ids(await teacher.agent.get(`${teacher.root}/people`))).toEqual([teacher.ids.user, member.ids.user].sort())
    expect((await student.agent.get(`${student.root}/photos/${id}`)).status).toBe(404)
    expect(codeOf(await student.agent.get(board))).toBe('role_too_low')
    const handedIn = await newNegative(other, { photoId: id })
    await other.agent.post(`${other.root}/negatives/${handedIn.id}/hand-in`)
    expect((await student.agent.get(`${student.root}/negatives/${handedIn.id}`)).status).toBe(404)
  })

  it('holds nothing that outlasts the class: no studio, token, role or address of their own', async () => {
    const { teacher, student } = await newClassWithStudent()
    const { token } = await newInvitation()
    for (const [path, body] of [['/api/studios', { name: 'Mine' }], ['/api/me/tokens', { name: 'Script' }], ['/api/me/email', { email: 'mika@ropeworks.example' }], ['/api/me/password', { password: 'a long enough one' }], ['/api/invitations/accept', { token }]] as const) {
      expect(codeOf(await student.agent.post(path, body)), path).toBe('account_required')
    }
    expect(codeOf(await teacher.agent.patch(`${teacher.root}/people/${student.id}`, { role: 'owner' }))).toBe('wrong_state')
    expect(codeOf(await student.agent.delete(`${student.root}/people/${student.id}`))).toBe('wrong_state')
    expect((await student.agent.get((await newStudio()).root)).status).toBe(404)
  })
})

describe('the board', () => {
  it('shows each student at the step that their things show', async () => {
    const { teacher, open, student, board } = await newClassWithStudent()
    await newStudent(open, 'Ada')
    const steps = async () => Object.fromEntries((await teacher.agent.get(board)).body.students.map((s: { name: string, step: string }) => [s.name, s.step]))
    expect(await steps()).toEqual({ Ada: 'joined', Mika: 'joined' })
    const photo = await newPhoto(student)
    expect(await steps()).toEqual({ Ada: 'joined', Mika: 'photo' })
    const negative = await newNegative(student, { photoId: photo.id })
    expect((await steps()).Mika).toBe('negative')
    expect((await filmOf(student, negative.id, 'png')).status).toBe(200)
    expect((await steps()).Mika).toBe('film')
    await student.agent.post(`${student.root}/negatives/${negative.id}/hand-in`)
    expect((await teacher.agent.get(board)).body).toMatchObject({ studentCount: 2, handedInCount: 1, students: [{ name: 'Ada', handedIn: [] }, { name: 'Mika', step: 'handed-in', handedIn: [{ id: negative.id, name: 'weir' }] }] })
    await student.agent.delete(`${student.root}/negatives/${negative.id}`)
    expect((await steps()).Mika).toBe('photo')
  })

  it('is told to look again by hints that other students don’t hear', async () => {
    const { teacher, open, student } = await newClassWithStudent()
    const other = await newStudent(open, 'Ada')
    const [board, neighbour] = [await listen(teacher.agent, teacher.root), await listen(other.agent, other.root)]
    await newPhoto(student)
    await board.until(() => board.hints().some(hint => hint.topic === 'classes' && hint.id === open.id))
    await teacher.agent.post(`${teacher.root}/papers`, { name: 'Cotton' })
    await neighbour.until(() => neighbour.hints().some(hint => hint.topic === 'papers'))
    expect(neighbour.hints().map(hint => hint.topic)).toEqual(['papers'])
    await teacher.agent.patch(`${teacher.root}/classes/${open.id}`, { revision: 1, endsAt: inDays(9) })
    await neighbour.until(() => neighbour.hints().some(hint => hint.topic === 'classes'))
    await Promise.all([board.leave(), neighbour.leave()])
  })
})

describe('handing in', () => {
  it('shows a picture to owners and technicians only, who may look at it and print it; taken back, it is private again', async () => {
    const { teacher, student } = await newClassWithStudent()
    const [technician, member, outsider] = [await newPersonIn(teacher.ids.studio, 'technician'), await newPersonIn(teacher.ids.studio, 'member'), await newStudio()]
    const negative = await newNegative(student)
    const at = `${teacher.root}/negatives/${negative.id}`
    const photo = `${teacher.root}/photos/${negative.photoId}`
    const looks = [at, `${at}/forecast?width=64&state=photo`, `${at}/print-card`, photo, `${photo}/thumbnail`, `${photo}/proxy?width=64`]
    const statuses = async (agent: Agent) => [...new Set(await Promise.all(looks.map(async path => (await agent.get(path)).status)))]
    expect(await statuses(teacher.agent)).toEqual([404])
    const handedIn = await student.agent.post(`${at}/hand-in`)
    expect(Date.parse(handedIn.body.handedInAt)).toBeGreaterThan(Date.now() - 60_000)
    expect(await Promise.all([teacher, technician, member, outsider].map(one => statuses(one.agent)))).toEqual([[200], [200], [404], [404]])
    expect((await outsider.agent.get(`${outsider.root}/negatives/${negative.id}`)).status).toBe(404)
    expect((await teacher.agent.fetch('GET', `${at}/file?format=png`)).status).toBe(202)
    // Seen, and still the student's own: nothing of it changes hands, and the original, which may say where it was taken, stays.
    const notTheirs = await Promise.all([
      teacher.agent.get(`${photo}/file`), teacher.agent.patch(photo, { name: 'Mine', revision: 1 }), teacher.agent.delete(photo), teacher.agent.patch(at, { name: 'Mine', revision: 1 }), teacher.agent.delete(at),
      teacher.agent.delete(`${at}/hand-in`), teacher.agent.post(`${teacher.root}/negatives`, { photoId: negative.photoId, process: 'salt', size: { widthMm: 30, heightMm: 20 } }),
    ])
    expect(notTheirs.map(codeOf)).toEqual(Array(7).fill('role_too_low'))
    for (const list of ['photos', 'negatives']) expect((await teacher.agent.get(`${teacher.root}/${list}`)).body.items).toEqual([])
    expect((await student.agent.delete(`${at}/hand-in`)).body.handedInAt).toBeNull()
    expect(await statuses(teacher.agent)).toEqual([404])
  })

  it('is for students of a class', async () => {
    const studio = await newStudio()
    const { id } = await newNegative(studio)
    expect(codeOf(await studio.agent.post(`${studio.root}/negatives/${id}/hand-in`))).toBe('wrong_state')
  })
})

describe('the end of a class', () => {
  it('comes by itself on its date: then everything can be looked at and nothing changed, until the teacher moves it', async () => {
    const { teacher, open, student, board } = await newClassWithStudent()
    const negative = await newNegative(student)
    const at = `${student.root}/negatives/${negative.id}`
    await endClass(open.id, 1)
    expect((await student.agent.get('/api/me')).body.studios[0].class).toMatchObject({ isOver: true })
    expect((await student.agent.get(at)).status).toBe(200)
    const refused = await Promise.all([
      student.agent.call('POST', `${student.root}/photos`, { body: uploadForm([['weir.jpg', await newPicture()]]) }), student.agent.patch(at, { name: 'Weir', revision: 1 }), student.agent.delete(at), student.agent.post(`${at}/hand-in`),
    ])
    expect(refused.map(codeOf)).toEqual(Array(4).fill('class_over'))
    expect((await new Agent().post('/api/join/return', { personalCode: student.personalCode })).status).toBe(200)
    expect((await filmOf(student, negative.id, 'png')).status).toBe(200)
    expect((await teacher.agent.get(board)).body).toMatchObject({ isOver: true, joiningOpen: false })
    await teacher.agent.patch(board, { revision: 1, endsAt: inDays(3) })
    expect((await student.agent.post(`${at}/hand-in`)).status).toBe(200)
  })

  it('leaves some weeks to take things along, and then no way in', async () => {
    const { open, student } = await newClassWithStudent()
    await endClass(open.id, 29)
    expect((await student.agent.get(`${student.root}/photos`)).status).toBe(200)
    await endClass(open.id, 31)
    expect((await student.agent.get(`${student.root}/photos`)).status).toBe(404)
    expect((await student.agent.get('/api/me')).body.studios).toEqual([])
    expect((await new Agent().post('/api/join/return', { personalCode: student.personalCode })).status).toBe(410)
  })
})

describe('taking things along', () => {
  it('gives an archive that other programs read: the original’s bytes, settings, and the film at its size', async () => {
    const { open, student } = await newClassWithStudent()
    const pictures = [await newPicture(), await newPicture()]
    const uploaded = await student.agent.call('POST', `${student.root}/photos`, { body: uploadForm(pictures.map(bytes => ['weir.jpg', bytes])) })
    const [first] = uploaded.body.items
    await newNegative(student, { photoId: first.id, name: 'Weir / dawn' })
    await newNegative(student, { photoId: first.id, name: 'weir / Dawn', size: { widthMm: 50, heightMm: 30 } })
    await endClass(open.id, 1)
    const answer = await student.agent.fetch('GET', `${student.root}/take-along`)
    expect([answer.status, answer.headers.get('content-type')]).toEqual([200, 'application/zip'])
    expect(answer.headers.get('content-disposition')).toContain('filename="Mika, Rope Works Studio.zip"')
    const folder = newFolder()
    const path = join(folder, 'mika.zip')
    writeFileSync(path, Buffer.from(await answer.arrayBuffer()))
    // Read back by Python's zipfile: it checks every CRC-32, then unpacks.
    expect(await run('python3', '-m', 'zipfile', '--test', path)).toContain('Done testing')
    const listed = JSON.parse(await run('python3', '-c', `
import zipfile, hashlib, json, sys
z = zipfile.ZipFile(sys.argv[1]); z.extractall(sys.argv[2])
print(json.dumps({i.filename: hashlib.sha256(z.read(i)).hexdigest() for i in z.infolist()}))`, path, folder)) as Record<string, string>
    const files = ['curve.csv', 'film.pdf', 'print card.txt', 'settings.json']
    expect(Object.keys(listed).sort()).toEqual([
      'Read me.txt', ...['Weir - dawn', 'weir - Dawn 2'].flatMap(name => files.map(file => `negatives/${name}/${file}`)), 'photos/weir 2.jpg', 'photos/weir.jpg',
    ].sort())
    expect([listed['photos/weir.jpg'], listed['photos/weir 2.jpg']].sort()).toEqual(pictures.map(bytes => createHash('sha256').update(bytes).digest('hex')).sort())
    const text = (name: string) => readFileSync(join(folder, name), 'utf8')
    expect(JSON.parse(text('negatives/weir - Dawn 2/settings.json'))).toMatchObject({ process: 'cyanotype', size: { widthMm: 50, heightMm: 30 }, mirror: true, photo: expect.stringMatching(/^photos\/weir( 2)?\.jpg$/) })
    expect(text('negatives/Weir - dawn/curve.csv').split('\n')).toHaveLength(1 + 1025 + 1)
    // 60 × 40 mm in points of 1/72 inch, as poppler's pdfinfo rounds them
    expect(await run('pdfinfo', join(folder, 'negatives/Weir - dawn/film.pdf'))).toMatch(/Page size:\s+170\.079 x 113\.386 pts/)
  })

  it('turns a student into an account once the letter’s link was followed: everything stays, whatever becomes of the class', async () => {
    const { teacher, open, student, board } = await newClassWithStudent()
    const { id } = await newPhoto(student)
    await endClass(open.id, 2)
    const [email, password] = [`${randomUUID()}@ropeworks.example`, 'a long enough one']
    await sql('update sessions set fresh_at = now() - interval \'11 minutes\' where user_id = $1', [student.id])
    expect(codeOf(await student.agent.post('/api/me/account', { email, password }))).toBe('fresh_sign_in_required')
    await student.agent.post('/api/join/return', { personalCode: student.personalCode })
    expect((await student.agent.post('/api/me/account', { email, password })).status).toBe(202)
    expect((await new Agent().post('/api/auth/login', { email, password })).status).toBe(401)
    await new Agent().post('/api/auth/email-confirmations', { token: secretIn(await letterTo(email, 'email-change')) })
    const home = new Agent()
    const me = await home.post('/api/auth/login', { email, password })
    expect(me.body).toMatchObject({ user: { id: student.id, name: 'Mika', email }, studios: [{ role: 'member' }] })
    expect(me.body.studios[0].class).toBeUndefined()
    await endClass(open.id, 90)
    expect((await home.patch(`${student.root}/photos/${id}`, { name: 'Weir at home', revision: 1 })).body.name).toBe('Weir at home')
    expect((await new Agent().post('/api/join/return', { personalCode: student.personalCode })).status).toBe(410)
    expect((await teacher.agent.get(board)).body.students).toMatchObject([{ name: 'Mika', hasAccount: true }])
  })
})

describe('a student who is taken out', () => {
  it('is out at once, and can be taken in again', async () => {
    const { teacher, student, board } = await newClassWithStudent()
    expect((await teacher.agent.delete(`${board}/students/${student.id}`)).status).toBe(204)
    expect((await student.agent.get('/api/me')).status).toBe(401)
    expect((await student.agent.post('/api/join/return', { personalCode: student.personalCode })).status).toBe(410)
    expect((await teacher.agent.get(board)).body).toMatchObject({ studentCount: 0, students: [{ removedAt: expect.any(String) }] })
    expect((await teacher.agent.delete(`${board}/students/${student.id}`)).status).toBe(404)
    expect((await teacher.agent.post(`${board}/students/${student.id}/restore`)).status).toBe(204)
    expect((await student.agent.post('/api/join/return', { personalCode: student.personalCode })).status).toBe(200)
    expect((await student.agent.get(`${student.root}/photos`)).status).toBe(200)
  })
})

describe('the audit trail of a class', () => {
  it('says who did what, by ids and without names or codes', async () => {
    const { teacher, open, student, board } = await newClassWithStudent()
    await teacher.agent.post(`${board}/students/${student.id}/personal-code`)
    const rows = await sql('select kind, user_id, details::text from events where studio_id = $1 and kind like \'class.%\' order by id', [teacher.ids.studio])
    expect(rows.map(row => [row.kind, row.user_id])).toEqual([['class.opened', teacher.ids.user], ['class.joined', student.id], ['class.student-code-renewed', teacher.ids.user]])
    for (const secret of ['Mika', open.roomCode, student.personalCode]) expect(JSON.stringify(rows)).not.toContain(secret)
  })
})

describe('after the time to take things along', () => {
  it('the students of the class are erased with their files, and nobody else is', async () => {
    const own = await ownInstallation()
    const web = await own.web()
    const teacher = await own.studioAt(web)
    const open = await newClass(teacher)
    const [student, kept] = [await newStudent(open, 'Mika', web.address), await newStudent(open, 'Ada', web.address)]
    const lasting = await newStudent(await newClass(teacher), 'Mika', web.address)
    const photos = await Promise.all([student, kept, lasting].map(one => newPhoto(one)))
    const negative = await newNegative(kept, { photoId: photos[1].id })
    await kept.agent.post(`${kept.root}/negatives/${negative.id}/hand-in`)
    await own.rows('update users set email = $2 where id = $1', [kept.id, 'ada@ropeworks.example'])
    await own.rows('update class_students set kept_at = now(), code_hash = null where id = $1', [kept.id])
    await own.rows('update classes set ends_at = now() - interval \'31 days\' where id = $1', [open.id])
    const original = (photo: { id: string }) => own.inStorage('originals', teacher.ids.studio, photo.id)
    expect(photos.map(photo => existsSync(original(photo)))).toEqual([true, true, true])
    own.worker()
    await vi.waitUntil(async () => (await own.rows('select 1 from class_students where class_id = $1', [open.id])).length === 0, { timeout: 20_000, interval: 100 })
    expect(photos.map(photo => existsSync(original(photo)))).toEqual([false, true, true])
    expect(await own.rows('select name, email from users where id = $1', [student.id])).toEqual([{ name: 'Erased account', email: `${student.id}@erased.invalid` }])
    expect((await own.rows('select uploader_id from photos')).map(row => row.uploader_id).sort()).toEqual([kept.id, lasting.id].sort())
    expect((await kept.agent.get(`${kept.root}/photos`)).body.items).toHaveLength(1)
    // What an account keeps is private again.
    expect((await teacher.agent.get(`${teacher.root}/negatives/${negative.id}`)).status).toBe(404)
    const board = await teacher.agent.get(`${teacher.root}/classes/${open.id}`)
    expect(board.body).toMatchObject({ erasedAt: expect.any(String), roomCode: null, joinUrl: null, students: [] })
    expect(codeOf(await teacher.agent.patch(`${teacher.root}/classes/${open.id}`, { revision: board.body.revision, endsAt: inDays(5) }))).toBe('wrong_state')
  })
})

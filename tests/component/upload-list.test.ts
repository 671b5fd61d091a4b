import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import UploadList from '../../components/photos/UploadList.vue'
import type { Upload } from '../../composables/usePhotoUploads'

const upload = (key: number, fields: Partial<Upload>): Upload =>
  ({ key, name: `picture ${key}.jpg`, bytes: 4_200_000, state: 'waiting', share: 0, alreadyHere: false, message: '', retryable: false, ...fields })
const mountList = (uploads: Upload[], share = 0) => mountSuspended(UploadList, { props: { uploads, share } })

describe('UploadList', () => {
  it('shows nothing when nothing is on its way', async () => {
    expect((await mountList([])).find('section').exists()).toBe(false)
  })

  it('tells how far all of them and each of them is', async () => {
    const list = await mountList([upload(1, { state: 'kept', share: 1 }), upload(2, { state: 'sending', share: 0.4 }), upload(3, {})], 0.47)
    expect(list.find('h2').text()).toBe('1 of 3 photos sent')
    expect(list.findAll('[role=progressbar]').map(bar => [bar.attributes('aria-label'), bar.attributes('aria-valuenow')])).toEqual([['All photos', '47'], ['picture 2.jpg', '40'], ['picture 3.jpg', '0']])
    expect(list.text()).toContain('40 %')
    expect(list.text()).toContain('waits')
  })

  it('says that a file is being read once it has left', async () => {
    expect((await mountList([upload(1, { state: 'sending', share: 1 })])).text()).toContain('being read')
  })

  it('explains a refusal in the service’s sentence, with another try only where one can help', async () => {
    const list = await mountList([
      upload(1, { state: 'refused', message: 'This is not a picture.' }), upload(2, { state: 'refused', message: 'The studio doesn’t answer.', retryable: true }),
    ])
    expect(list.findAll('[role=alert]').map(alert => alert.text())).toEqual(['This is not a picture.', 'The studio doesn’t answer.'])
    const tries = list.findAll('button').filter(button => button.text() === 'Try again')
    expect(tries).toHaveLength(1)
    await tries[0]!.trigger('click')
    expect(list.emitted('goOn')).toEqual([[2]])
    expect(list.find('h2').text()).toBe('No photo was added')
  })

  it('says which files were here already', async () => {
    const list = await mountList([upload(1, { state: 'kept', share: 1, alreadyHere: true }), upload(2, { state: 'kept', share: 1 })])
    expect(list.text()).toContain('picture 1.jpg was here already; nothing is kept twice.')
    expect(list.find('h2').text()).toBe('2 photos added')
  })

  it('says what each one waits for, and offers what helps', async () => {
    const list = await mountList([
      upload(1, { state: 'cut', share: 0.4 }), upload(2, { state: 'paused', share: 0.6 }), upload(3, { state: 'stored', share: 0.48 }),
    ])
    expect(list.text()).toContain('Waiting for the connection; it goes on by itself.')
    expect(list.text()).toContain('paused at 60 %')
    expect(list.text()).toContain('Choose picture 3.jpg again to go on at 48 %.')
    const labels = list.findAll('button').map(button => button.attributes('aria-label'))
    expect(labels).toEqual(['Pause: picture 1.jpg', 'Stop: picture 1.jpg', 'Go on: picture 2.jpg', 'Stop: picture 2.jpg', 'Choose again: picture 3.jpg', 'Remove: picture 3.jpg'])
    const chosen = new File(['x'], 'picture 3.jpg')
    const input = list.find('[data-testid=choose-again]')
    Object.defineProperty(input.element, 'files', { value: [chosen], configurable: true })
    await input.trigger('change')
    expect(list.emitted('chooseAgain')).toEqual([[3, chosen]])
  })

  it('names what was broken off when nothing else is there', async () => {
    expect((await mountList([upload(1, { state: 'stored' }), upload(2, { state: 'stored' })])).find('h2').text()).toBe('2 photos were broken off')
    expect((await mountList([upload(1, { state: 'paused' })])).find('h2').text()).toBe('One photo is paused')
  })
})

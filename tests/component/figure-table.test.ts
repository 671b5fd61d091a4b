import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import FigureTable from '../../components/ui/FigureTable.vue'
import { stripColumns } from '../../utils/exposure-strip'

const columns = stripColumns('s', 'lightness')
const rows = () => [{ exposure: '30 s', first: '', second: '' }, { exposure: '42 s', first: '', second: '' }]
const mounted = (props = {}) => mountSuspended(FigureTable<'exposure' | 'first' | 'second'>, { props: { columns, rows: rows(), problems: [], rowName: 'Step', ...props }, attachTo: document.body })

describe('FigureTable', () => {
  it('names every field by its row and column, and gives on what is typed', async () => {
    const table = await mounted()
    expect(table.findAll('input').map(input => input.attributes('aria-label'))).toEqual(['Step 1, Exposed in all', 'Step 1, L*', 'Step 1, Repeat', 'Step 2, Exposed in all', 'Step 2, L*', 'Step 2, Repeat'])
    await table.find('[aria-label="Step 2, L*"]').setValue('71,5')
    expect(table.emitted('update:rows')![0]![0]).toEqual([rows()[0], { exposure: '42 s', first: '71,5', second: '' }])
  })

  it('goes down the column on Enter', async () => {
    const table = await mounted()
    await table.find('[aria-label="Step 1, L*"]').trigger('keydown', { key: 'Enter' })
    await new Promise(resolve => setTimeout(resolve))
    expect(document.activeElement!.getAttribute('aria-label')).toBe('Step 2, L*')
  })

  it('takes a block of cells from a spreadsheet', async () => {
    const table = await mounted()
    const event = new Event('paste', { cancelable: true }) as ClipboardEvent
    Object.defineProperty(event, 'clipboardData', { value: { getData: () => '80,1\t79\n70\t71' } })
    table.find('[aria-label="Step 1, L*"]').element.dispatchEvent(event)
    expect(table.emitted('update:rows')![0]![0]).toEqual([{ exposure: '30 s', first: '80,1', second: '79' }, { exposure: '42 s', first: '70', second: '71' }])
    expect(event.defaultPrevented).toBe(true)
  })

  it('ties a problem to its field', async () => {
    const table = await mounted({ problems: [{ row: 1, key: 'first', message: 'From 0 to 100.' }] })
    const field = table.find('[aria-label="Step 2, L*"]')
    expect(field.attributes('aria-invalid')).toBe('true')
    expect(table.find(`#${CSS.escape(field.attributes('aria-describedby')!)}`).text()).toBe('From 0 to 100.')
  })
})

import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import TypedValuesTable from '../../components/benches/TypedValuesTable.vue'
import { evenRows, readTypedRows } from '../../utils/typed-values'

type Rows = ReturnType<typeof evenRows>

async function mountTable(rows: Rows, problems: ReturnType<typeof readTypedRows>['problems'] = []) {
  const table = await mountSuspended(TypedValuesTable, {
    props: { 'rows': rows, 'valueName': 'Density', problems, 'onUpdate:rows': (next: Rows) => table.setProps({ rows: next }) },
    attachTo: document.body,
  })
  const rowsNow = () => table.props('rows') as Rows
  const paste = (cell: string, text: string) => table.find(`[data-cell="${cell}"]`).trigger('paste', { clipboardData: { getData: () => text } })
  return { table, rowsNow, paste }
}

describe('TypedValuesTable', () => {
  it('keeps what is typed as it is typed, decimal comma and all', async () => {
    const { table, rowsNow } = await mountTable(evenRows(5))
    await table.find('[data-cell="2-value"]').setValue('0,74')
    expect(rowsNow()[2]).toEqual({ ink: '50', value: '0,74' })
    expect(readTypedRows(rowsNow()).values).toEqual([{ level: 0.5, value: 0.74 }])
  })

  it('fills the levels that stand with a pasted column of values, from the cell it lands in', async () => {
    const { table, rowsNow, paste } = await mountTable(evenRows(5))
    await paste('1-value', '1,20\n0,90\n0,44\n')
    expect(rowsNow().map(row => row.value)).toEqual(['', '1,20', '0,90', '0,44', ''])
    expect(rowsNow().map(row => row.ink)).toEqual(['0', '25', '50', '75', '100'])
    expect(table.emitted('pasted')![0]).toMatchObject([{ valuesOnly: true }])
  })

  it('takes two pasted columns with their levels, longer than the table', async () => {
    const { rowsNow, paste } = await mountTable(evenRows(2))
    await paste('0-ink', '0\t1.42\n30\t1.1\n100\t0.08')
    expect(rowsNow()).toEqual([{ ink: '0', value: '1.42' }, { ink: '30', value: '1.1' }, { ink: '100', value: '0.08' }])
  })

  it('lets a single pasted number be an ordinary paste', async () => {
    const { table, paste } = await mountTable(evenRows(3))
    await paste('0-value', '1,42')
    expect(table.emitted('pasted')).toBeUndefined()
  })

  it('goes down the column by Enter and opens a new row after the last', async () => {
    const { table, rowsNow } = await mountTable(evenRows(2))
    await table.find('[data-cell="1-value"]').trigger('keydown', { key: 'Enter' })
    expect(rowsNow()).toHaveLength(3)
    expect((document.activeElement as HTMLElement).dataset.cell).toBe('2-value')
  })

  it('ties a problem to its field', async () => {
    const rows = [{ ink: '0', value: 'dark' }, { ink: '50', value: '0,7' }]
    const { table } = await mountTable(rows, readTypedRows(rows).problems)
    const wrong = table.find('[data-cell="0-value"]')
    expect(wrong.attributes('aria-invalid')).toBe('true')
    expect(table.find(`#${wrong.attributes('aria-describedby')}`).text()).toBe('“dark” is not a number.')
    expect(table.find('[data-cell="1-value"]').attributes('aria-invalid')).toBe('false')
  })
})

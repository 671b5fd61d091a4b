import { describe, expect, it } from 'vitest'
import { methodsOf } from '../../../server/utils/contract-routes'

describe('the methods of a path', () => {
  it('are the contract’s', () => {
    expect(methodsOf('/api/studios/rope-works/benches').sort()).toEqual(['GET', 'POST'])
    expect(methodsOf('/api/me').sort()).toEqual(['GET', 'PATCH'])
  })
  it('are none where the contract has no such path', () => {
    for (const path of ['/api/', '/api/nothing', '/api/_auth/session', '/api/openapixjson', '/api/studios/rope-works/spoons', '/api/studios//benches']) expect(methodsOf(path)).toEqual([])
  })
  it('of the shelf hold for its six drawers only', () => {
    for (const drawer of ['papers', 'sensitizers', 'films', 'inkjets', 'lamps', 'scanners']) expect(methodsOf(`/api/studios/x/${drawer}/y`).sort()).toEqual(['GET', 'PATCH'])
    expect(methodsOf('/api/studios/x/spoons/y')).toEqual([])
  })
})

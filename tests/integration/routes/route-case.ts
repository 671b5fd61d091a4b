import type { contract } from '../../../shared/schemas/contract'
import type { Agent, CallOptions } from '../../support/studio'
import type { World } from './world'

/** A good call of a route: how to fill its path, what to send and what it answers. */
export interface GoodCall extends CallOptions {
  params?: Record<string, string>
  query?: Record<string, string>
  status?: number
}

export interface RouteCase {
  /** below server/api */
  file: string
  row: keyof typeof contract
  /** who makes the good calls, where the least role that may call does not do */
  caller?: (world: World) => Agent | Promise<Agent>
  /** builds what the call needs and tells the call; a fresh one each time */
  good: (world: World) => GoodCall | Promise<GoodCall>
  /** calls that must be refused, besides those that follow from the contract (unknown fields, malformed JSON, ids that are none) */
  bad?: { why: string, call: (world: World) => Partial<GoodCall> & { status: number, code: string } }[]
  /** a stream without an end: only its beginning is looked at */
  endless?: boolean
}

import { benchEndpoints } from '#shared/schemas/benches'
import { db } from '../../../db/client'
import { viewOf } from '../../../services/benches'
import { starterBench } from '../../../services/starter-benches'

export default defineRoute(benchEndpoints.createStarterBench, ({ event, studio, body }) => db().transaction(async (tx) => {
  const { created, bench } = await starterBench(tx, studio, body.process)
  setResponseStatus(event, created ? 201 : 200)
  return await viewOf(tx, bench)
}))

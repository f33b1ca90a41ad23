import { closeConnections } from '../client'
import { plantDemo } from './plant'

try {
  const planted = await plantDemo()
  console.log(planted ? 'The demo was planted.' : 'The demo was here already.')
} finally {
  await closeConnections()
}

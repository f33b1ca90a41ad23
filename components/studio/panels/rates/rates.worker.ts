import { expose } from 'comlink'
import { ratesService } from './rates-service'

expose(ratesService())

import { expose } from 'comlink'
import { candidatesService } from './candidates-service'

expose(candidatesService)

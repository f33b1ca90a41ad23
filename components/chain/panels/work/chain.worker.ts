import { expose } from 'comlink'
import { chainWork } from './chain-work'

expose(chainWork)

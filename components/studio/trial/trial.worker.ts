import { expose } from 'comlink'
import { createSession } from './session'

/* Samples live here, off the page's thread. */
expose(createSession())

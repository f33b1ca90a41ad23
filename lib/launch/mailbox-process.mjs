import { startMailbox } from './mailbox.mjs'

/** The mailbox as a process: `node mailbox-process.mjs FOLDER`, started by the start command, which it follows when that ends. */
const folder = process.argv[2]
if (!folder || !process.send) {
  process.stderr.write('The mailbox is run by the start command.\n')
  process.exit(2)
}

const mailbox = await startMailbox({ folder })
process.send({ port: mailbox.port })
const leave = () => void mailbox.close().then(() => process.exit(0))
process.on('disconnect', leave)
process.on('SIGTERM', leave)
process.on('SIGINT', leave)

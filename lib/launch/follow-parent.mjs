/*
 * Loaded before the app's server (node --import): when the start command dies without a goodbye, the channel to it closes, and the server
 * ends too instead of keeping the port.
 */
process.on('disconnect', () => process.kill(process.pid, 'SIGTERM'))
process.channel?.unref()

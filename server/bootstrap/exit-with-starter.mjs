// Loaded into the server before its own code: when the process that started it is gone, even killed, the server ends too.
process.on('disconnect', () => process.kill(process.pid, 'SIGTERM'));
// Listening must not keep a process alive that has nothing else to do.
process.channel?.unref();

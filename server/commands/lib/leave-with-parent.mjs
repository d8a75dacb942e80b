// Loaded before a supervised program: when the supervisor is gone, however that happened, the program ends in order.
process.once('disconnect', () => process.kill(process.pid, 'SIGTERM'));
process.channel?.unref();

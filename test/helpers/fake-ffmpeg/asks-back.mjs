#!/usr/bin/env node
// Says so when asked to stop, and goes on.
process.on('SIGTERM', () => console.error('asked to stop'));
setInterval(() => {}, 1000);
console.log('ready');

/** Required by a process that is measured: tells its parent the largest resident memory, MB, as it ends. */
process.on('exit', () => process.send?.({ memory: process.resourceUsage().maxRSS / 1024 }));

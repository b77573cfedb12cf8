#!/usr/bin/env node
/** The program `stickband`. */
import { run } from './run';

// A reader of our output that stops early (head, a closed pager) is no fault.
process.stdout.on('error', (error: NodeJS.ErrnoException) => {
  if (error.code !== 'EPIPE') throw error;
});

run(process.argv.slice(2), process).then((code) => {
  process.exitCode = code;
});

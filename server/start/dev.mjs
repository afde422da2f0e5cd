// npm run dev: the server restarted on change, and Vite in front of it.
import { spawn } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { ensurePackages } from './packages.mjs';

const root = fileURLToPath(new URL('../..', import.meta.url));
ensurePackages(root);
const children = [
  spawn(process.execPath, ['server/start/start.mjs', '--watch'], { cwd: root, stdio: 'inherit' }),
  spawn(process.execPath, ['node_modules/vite/bin/vite.js'], { cwd: root, stdio: 'inherit' }),
];
const stop = () => children.forEach((child) => child.kill('SIGTERM'));
process.on('SIGINT', stop);
process.on('SIGTERM', stop);

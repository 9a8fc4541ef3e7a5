import { render } from 'preact';
import './look/window.css';
import { acceptDrops } from './dropping.ts';
import { listenToKeys } from './keys.ts';
import { readProgram } from './state/program.ts';
import { Window } from './Window.tsx';

const root = document.getElementById('window');
if (!root) throw new Error('index.html has no element "window"');
render(<Window />, root);
listenToKeys();
acceptDrops();
readProgram();

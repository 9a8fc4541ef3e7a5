import { app, type BrowserWindow, Menu, session } from 'electron';
import { makeApp } from '../api/app.ts';
import { desktopDialogs } from './desktopDialogs.ts';
import { registerScheme, serveScheme, windowOrigin } from './desktopScheme.ts';
import { confine, denyPermissions, makeWindow } from './desktopWindow.ts';
import { realServices } from './services.ts';

// The desktop app. Nothing here is awaited at the top: the app is not ready before this file has been run to its end.
registerScheme();
app.enableSandbox();
app.on('web-contents-created', (_event, contents) => confine(contents));

let window: BrowserWindow | null = null;

if (app.requestSingleInstanceLock()) {
  app.on('second-instance', () => {
    if (window?.isMinimized()) window.restore();
    window?.focus();
  });
  app.on('window-all-closed', () => app.quit()); // on every system: a tool with one window ends with it
  app.whenReady().then(open).catch(giveUp);
} else {
  app.quit();
}

async function open(): Promise<void> {
  // The Mac needs a menu for its copy and paste keys; elsewhere there is nothing in it that the window does not have.
  if (process.platform !== 'darwin') Menu.setApplicationMenu(null);
  denyPermissions(session.defaultSession);
  const opened = makeWindow();
  window = opened;
  const service = makeApp(realServices({ host: 'desktop', shell: desktopDialogs(() => opened) }));
  serveScheme(service);
  app.once('will-quit', (event) => {
    event.preventDefault();
    service.close().then(() => app.exit(0), giveUp);
  });
  await opened.loadURL(`${windowOrigin}/`);
}

function giveUp(error: unknown): void {
  console.error('tetherfall: the desktop app cannot go on:', error);
  app.exit(1);
}

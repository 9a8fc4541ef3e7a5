import { BrowserWindow, type Session, type WebContents } from 'electron';
import { windowOrigin } from './desktopScheme.ts';

/** The window: sandboxed, without Node, without a preload script; it knows only our scheme. */
export function makeWindow(): BrowserWindow {
  const window = new BrowserWindow({
    title: 'Tetherfall',
    width: 1440,
    height: 900,
    minWidth: 960,
    minHeight: 640,
    backgroundColor: '#ffffff',
    webPreferences: {
      sandbox: true,
      contextIsolation: true,
      nodeIntegration: false,
      nodeIntegrationInWorker: false,
      nodeIntegrationInSubFrames: false,
      webSecurity: true,
      webviewTag: false,
      spellcheck: false, // would fetch dictionaries
    },
  });
  return window;
}

/** Whatever a page asks of the system is denied: the window needs none of it, and Electron's default is to grant. */
export function denyPermissions(session: Session): void {
  session.setPermissionRequestHandler((_contents, _permission, answer) => answer(false));
  session.setPermissionCheckHandler(() => false);
  session.setDevicePermissionHandler(() => false);
}

/** No page opens another window, goes anywhere else, or holds a page of its own. */
export function confine(contents: WebContents): void {
  contents.setWindowOpenHandler(() => ({ action: 'deny' }));
  const stayHere = (event: { url: string; preventDefault(): void }) => {
    if (!isOurs(event.url)) event.preventDefault();
  };
  contents.on('will-navigate', stayHere);
  contents.on('will-frame-navigate', stayHere);
  contents.on('will-redirect', stayHere);
  contents.on('will-attach-webview', (event) => event.preventDefault());
}

function isOurs(url: string): boolean {
  try {
    const { protocol, host } = new URL(url);
    return `${protocol}//${host}` === windowOrigin;
  } catch {
    return false; // no address at all
  }
}

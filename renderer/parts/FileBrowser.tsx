import { useEffect, useRef, useState } from 'preact/hooks';
import { browseProblem, browsing, listed, listFolder, type Purpose, takeFile } from '../state/browsing.ts';
import { instantText } from './instantText.ts';

const titles: Readonly<Record<Purpose, string>> = {
  openFootage: 'Open footage',
  openSheet: 'Open sheet',
  saveSheet: 'Save sheet',
};

/** Files of the machine that the program runs on, for hosts without dialogs of their own; a path can be typed as well. */
export function FileBrowser() {
  const dialog = useRef<HTMLDialogElement>(null);
  const purpose = browsing.value?.purpose;
  useEffect(() => {
    if (purpose && !dialog.current?.open) dialog.current?.showModal();
    if (!purpose) dialog.current?.close();
  }, [purpose]);
  return (
    <dialog
      ref={dialog}
      class="file-browser"
      aria-label={purpose ? titles[purpose] : 'Files'}
      onClose={() => {
        browsing.value = null;
      }}
    >
      {purpose ? <Browser purpose={purpose} /> : null}
    </dialog>
  );
}

function Browser({ purpose }: { readonly purpose: Purpose }) {
  const folder = listed.value;
  const [path, setPath] = useState('');
  const saving = purpose === 'saveSheet';
  const wanted = purpose === 'openFootage' ? 'footage' : 'sheet';
  const separator = folder?.folder.includes('\\') ? '\\' : '/';
  const typed = path.trim();
  const whole =
    saving && typed !== '' && !/[\\/]/.test(typed) && folder
      ? `${folder.folder.replace(/[\\/]$/, '')}${separator}${typed}`
      : typed;
  return (
    <form
      method="dialog"
      onSubmit={(event) => {
        event.preventDefault();
        if (whole !== '') takeFile(purpose, whole);
      }}
    >
      <h2>{titles[purpose]}</h2>
      <label class="path-field">
        {saving ? 'File name or whole path' : 'Whole path'}
        <input
          type="text"
          spellcheck={false}
          autocomplete="off"
          value={path}
          placeholder={
            saving
              ? 'sheet.json'
              : purpose === 'openFootage'
                ? '/…/drop.mp4, or numbered stills: /…/drop-%05d.tif'
                : '/…/sheet.json'
          }
          onInput={(event) => setPath(event.currentTarget.value)}
        />
      </label>
      {folder ? (
        <>
          <div class="folder-row">
            <button
              type="button"
              disabled={folder.parent === null}
              onClick={() => folder.parent !== null && void listFolder(folder.parent)}
            >
              Up
            </button>
            <button type="button" onClick={() => void listFolder(folder.home)}>
              Home
            </button>
            <span class="folder-path">{folder.folder}</span>
          </div>
          <ul class="file-list" aria-label={`In ${folder.folder}`}>
            {folder.folders.map((f) => (
              <li key={f.path}>
                <button type="button" class="folder" onClick={() => void listFolder(f.path)}>
                  {f.name}
                  {separator}
                </button>
              </li>
            ))}
            {folder.files
              .filter((f) => f.kind === wanted)
              .map((f) => (
                <li key={f.path}>
                  <button
                    type="button"
                    onClick={() => (saving ? setPath(f.path) : takeFile(purpose, f.path))}
                  >
                    <span>{f.name}</span>
                    <span class="hint">
                      {sizeText(f.sizeBytes)} · {instantText(f.modifiedAt)}
                    </span>
                  </button>
                </li>
              ))}
            {folder.folders.length + folder.files.filter((f) => f.kind === wanted).length === 0 ? (
              <li class="hint">No folders and no {wanted === 'footage' ? 'footage' : 'sheets'} here.</li>
            ) : null}
          </ul>
        </>
      ) : null}
      {browseProblem.value ? (
        <p class="problem" role="alert">
          {browseProblem.value}
        </p>
      ) : null}
      <div class="button-row dialog-end">
        <button
          type="button"
          onClick={() => {
            browsing.value = null;
          }}
        >
          Close
        </button>
        <button type="submit" class="primary" disabled={whole === ''}>
          {saving ? 'Save' : 'Open'}
        </button>
      </div>
    </form>
  );
}

function sizeText(bytes: number): string {
  return bytes < 1e6 ? `${Math.ceil(bytes / 1e3)} kB` : `${(bytes / 1e6).toFixed(1)} MB`;
}

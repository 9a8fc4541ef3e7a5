/** What a file is picked or saved as. */
type OpenKind = 'footage' | 'sheet';
type SaveKind = 'sheet' | 'result';

/** What a host must offer. Without dialogs of its own the window shows the server-side file browser (GET /api/files). */
export interface Shell {
  /** True where openFile and saveFile show the system's own dialogs. */
  readonly dialogs: boolean;
  /** @returns an absolute path, or null when the user backed out */
  openFile(kind: OpenKind): Promise<string | null>;
  saveFile(kind: SaveKind, suggestedName: string): Promise<string | null>;
}

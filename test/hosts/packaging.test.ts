import { createRequire } from 'node:module';
import { resolve } from 'node:path';
import { describe, expect, it } from 'vitest';
import manifest from '../../package.json' with { type: 'json' };

// The packager's own check of its configuration, which works without the network.
const packager = createRequire(createRequire(import.meta.url).resolve('electron-builder'));
const { getConfig, validateConfiguration } = packager('app-builder-lib/out/util/config/config') as {
  getConfig(folder: string, file: string, options: object | null): Promise<Record<string, unknown>>;
  validateConfiguration(config: object, log: object): Promise<void>;
};
const { DebugLogger } = packager('builder-util') as { DebugLogger: new (enabled: boolean) => object };
const configuration = () => getConfig(resolve(import.meta.dirname, '../..'), 'electron-builder.yml', null);

describe('electron-builder.yml', () => {
  it('is what the packager understands', async () => {
    await validateConfiguration(await configuration(), new DebugLogger(false));
  });

  it('would be refused with a key that the packager does not know', async () => {
    const wrong = { ...(await configuration()), asarUnpak: [] };
    await expect(validateConfiguration(wrong, new DebugLogger(false))).rejects.toThrow(/asarUnpak/);
  });

  it('hands on no decoder library that may not be handed on', async () => {
    const { files } = await configuration();
    expect(JSON.stringify(files)).toMatch(/!node_modules\/\{node-av,@seydx,/);
  });

  it('packs the Electron that the package names', async () => {
    expect((await configuration()).electronVersion).toBe(manifest.devDependencies.electron);
  });

  it('starts the entry that is built, and shuts the ways in that the app does not need', async () => {
    expect(manifest.main).toBe('dist/main/electron.js');
    expect((await configuration()).electronFuses).toMatchObject({
      runAsNode: false,
      enableNodeOptionsEnvironmentVariable: false,
      enableNodeCliInspectArguments: false,
      onlyLoadAppFromAsar: true,
      enableEmbeddedAsarIntegrityValidation: true,
      grantFileProtocolExtraPrivileges: false,
    });
  });
});

import * as fs from 'node:fs';
import * as path from 'node:path';
import { describe, expect, it } from 'vitest';
import {
  changedBackups,
  placesFor,
  readBackupSettings,
  usualBackups,
  writeBackupSettings,
} from '../../main/backup-settings.ts';
import { newFolder } from './project/study-folder.ts';

describe('settings of backups', () => {
  it('come back as they were written, in a file for their owner alone', () => {
    const file = path.join(newFolder(), 'settings', 'backups.json');
    expect(readBackupSettings(file)).toEqual(usualBackups);
    const settings = { keep: 9, folder: '/safe', earlier: ['/before'] };
    writeBackupSettings(file, settings);
    expect(readBackupSettings(file)).toEqual(settings);
    if (process.platform !== 'win32') expect(fs.statSync(file).mode & 0o777).toBe(0o600);
  });

  it.each(['', '[', 'null', '3', '{"keep":-1,"folder":"relative","earlier":7}', '{"keep":1e9}'])(
    'that say nothing of use (%s) are the usual ones',
    (text) => {
      const file = path.join(newFolder(), 'backups.json');
      fs.writeFileSync(file, text);
      expect(readBackupSettings(file)).toEqual(usualBackups);
    },
  );

  it('remember every folder that was set', () => {
    const one = changedBackups(usualBackups, { keep: 3, folder: '/one' });
    const two = changedBackups(one, { keep: 500, folder: '/two' });
    expect(two).toEqual({ keep: 100, folder: '/two', earlier: ['/one'] });
    expect(changedBackups(two, { keep: 3.5, folder: null })).toEqual({
      keep: 3,
      folder: null,
      earlier: ['/two', '/one'],
    });
    expect(changedBackups(two, { keep: 3, folder: '/one' }).earlier).toEqual(['/two']);
  });

  it('keep backups beside the study unless a folder is set', () => {
    const at = path.join(path.sep, 'work', 'a.understory');
    const beside = path.join(path.sep, 'work', 'Understory backups');
    expect(placesFor(usualBackups, at)).toEqual({ keep: 5, folder: beside, earlier: [] });
    expect(placesFor({ ...usualBackups, folder: '/safe' }, at).folder).toBe('/safe');
  });
});

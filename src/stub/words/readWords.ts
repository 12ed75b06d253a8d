import type { Words } from '../translate';

/** Joins catalogue files, read as they stand: the compiled form of the app's catalogues needs the app's library. */
export function readWords(...files: string[]): Words {
  return Object.assign({}, ...files.map((file) => JSON.parse(file) as Words)) as Words;
}

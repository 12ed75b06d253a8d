import { expect, test } from 'vitest';
import { neededPackages } from './debian.mjs';
import { newestVersion } from './postgresPrograms.mjs';

const depends = `postgresql-15
  Depends: libpq5
  Depends: <debconf-2.0>
  Depends: libllvm14
<debconf-2.0>
libpq5
libllvm14
libc6
libxml2
postgresql-client-15
postgresql-common
perl
libperl5.36
`;

test('takes the programs and the libraries that are not installed, and no compiler or script language', () => {
  const packages = neededPackages(depends, new Set(['libc6']));
  expect(packages).toEqual(['postgresql-15', 'libpq5', 'libxml2', 'postgresql-client-15']);
});

test('the newest PostgreSQL from 15 on', () => {
  expect(newestVersion(['9.6', '13', '15', '17'])).toBe(17);
  expect(newestVersion(['13', '14'])).toBeUndefined();
});

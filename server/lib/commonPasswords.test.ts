import { describe, expect, test } from 'vitest';
import { isCommonPassword } from './commonPasswords';

const known = ['Cinder Flat Equipment Repair', 'cinder-flat', 'Dana Okafor', 'dana.okafor@example.com'];

describe('refused', () => {
  test.each([
    'passwordpassword',
    'Password12345678',
    'p@ssw0rdp@ssw0rd!',
    'qwertyuiopasdfghjkl',
    '123456789012345',
    '111111111111111',
    'abcabcabcabcabcabc',
    '1qaz2wsx3edc4rfv',
    'abcdefghijklmnop',
    'zyxwvutsrqponmlk',
    'letmeinletmein123',
    'iloveyou iloveyou',
    'Welcome-Welcome-2026',
    'correct horse battery staple',
    'contraseña123456',
    'cinderflat12345',
    'CinderFlatEquipmentRepair',
    'DanaOkafor2026!!',
    'dana.okafor@example.com',
    'Benchbell-Benchbell',
    'superman batman 99',
  ])('%s', (password) => {
    expect(isCommonPassword(password, known)).toBe(true);
  });
});

describe('taken', () => {
  test.each([
    'seven paper kites over town',
    'el perro duerme en la troca',
    'Flat tyre, cold coffee, Tuesday',
    'gK4#vX9!qLm2@zR7',
    '839205719462035',
    'ключ лежит под камнем у ворот',
    'Dana once fixed a tractor in snow',
    '!"§$%&/()=?`+#äöü',
    'demo-9f31c07ba2d4',
  ])('%s', (password) => {
    expect(isCommonPassword(password, known)).toBe(false);
  });
});

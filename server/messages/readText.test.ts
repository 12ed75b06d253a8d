import { expect, it } from 'vitest';
import { readText } from './readText';

// Stop, start and help words: Twilio's published defaults for long numbers, and 47 CFR 64.1200(a)(10).
it.each([
  ['STOP', 'stop'],
  [' stop. ', 'stop'],
  ['Opt  Out', 'stop'],
  ['"STOP"', 'stop'],
  ['UNSTOP', 'start'],
  ['Yes!', 'start'],
  ['info', 'help'],
  ['OK 4821', 'answer'],
  ['no4821', 'answer'],
  ['No - 4821', 'answer'],
  ['no 482', 'other'],
  ['no 48211', 'other'],
  ['NO', 'other'],
  ['stop by at noon?', 'maybe_stop'],
  ['Please stop', 'maybe_stop'],
  ['No más', 'maybe_stop'],
  ['no me escriban más', 'maybe_stop'],
  ['don’t text me', 'maybe_stop'],
  ['nonstop noise from the pump', 'other'],
  ['is it ready', 'other'],
  ['', 'other'],
])('%j is %s', (body, kind) => {
  expect(readText(body)).toBe(kind);
});

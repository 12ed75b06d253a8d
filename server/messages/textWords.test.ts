import { describe, expect, it } from 'vitest';
import { SegmentedMessage } from 'sms-segments-calculator';
import { LANGUAGES } from '#shared/domain/when';
import { OUTCOMES, PROGRESS } from '#shared/domain/stages';
import type { MachineNews, NamedMachine, NewsFacts } from './newsFacts';
import { foldText, wordText } from './textWords';

const named = (fleetNumber: string): NamedMachine => ({
  kind: 'wheelbarrow_compressor',
  maker: 'Hartwell',
  model: 'W9',
  fleetNumber,
  tag: '5WN3KT',
});

function facts(given: Partial<NewsFacts>): NewsFacts {
  const machines = given.machines ?? [named('17')];
  return {
    language: 'en',
    shop: {
      name: 'Cinder Flat Equipment Repair',
      textName: 'Cinder Flat',
      zone: 'America/Denver',
      phone: '+13035550142',
      address: '418 Flatiron Rd',
      gateNote: '',
    },
    personName: 'Dana',
    visit: { id: 'v', stubCode: '5WN3KT', arrivesAt: new Date('2026-12-03T16:00:00Z') },
    isBooked: false,
    news: [],
    link: 'https://bb.example/t/abcdefghijklmnopqrstuv',
    isFirst: false,
    ...given,
    machines,
    total: given.total ?? machines.length,
  };
}
const news = (
  kind: MachineNews['kind'],
  machine: NamedMachine,
  more: Partial<MachineNews> = {},
): MachineNews => ({
  kind,
  machine,
  outcome: null,
  stage: null,
  ...more,
});

describe('what a text says', () => {
  const link = 'https://bb.example/t/abcdefghijklmnopqrstuv';
  it.each<[string, Partial<NewsFacts>, string]>([
    [
      'a booking, named with its day, time and zone',
      { isBooked: true, machines: [named('9'), named('17'), named('22')] },
      `Cinder Flat: 3 machines booked for Thu 3 Dec, 9:00 am MST. Stub 5WN-3KT ${link}`,
    ],
    [
      'one machine here',
      { news: [news('checked_in', named('17'))] },
      `Cinder Flat: we have No. 17. Stub 5WN-3KT ${link}`,
    ],
    [
      'several machines here in one text',
      {
        machines: [named('9'), named('17'), named('22')],
        news: ['9', '17', '22'].map((n) => news('checked_in', named(n))),
      },
      `Cinder Flat: we have No. 9, No. 17 and No. 22. Stub 5WN-3KT ${link}`,
    ],
    ['ready', { news: [news('ready', named('17'))] }, `Cinder Flat: No. 17 is ready. Stub 5WN-3KT ${link}`],
    [
      'an outcome that is no repair, as what it is',
      { news: [news('ready_other', named('17'), { outcome: 'cannot_be_repaired' })] },
      `Cinder Flat: No. 17 cannot be repaired, ready to pick up. Stub 5WN-3KT ${link}`,
    ],
    [
      'two kinds of news, the one to act on first',
      {
        machines: [named('9'), named('17')],
        news: [news('checked_in', named('9')), news('ready', named('17'))],
      },
      `Cinder Flat: No. 17 is ready. We have No. 9. Stub 5WN-3KT ${link}`,
    ],
    [
      'a machine without a number, by its kind',
      { news: [news('ready', named(''))] },
      `Cinder Flat: your compressor is ready. Stub 5WN-3KT ${link}`,
    ],
    [
      'a cancelled drop-off',
      { news: [news('cancelled', named('17'))] },
      `Cinder Flat: No. 17 for Thu 3 Dec is cancelled. Stub 5WN-3KT ${link}`,
    ],
    [
      'how to stop, in the first text to a phone',
      { news: [news('ready', named('17'))], isFirst: true },
      `Cinder Flat: No. 17 is ready. Stub 5WN-3KT ${link} Reply STOP to stop, HELP for help`,
    ],
    [
      'the same in Spanish',
      {
        language: 'es',
        machines: [named('9'), named('17')],
        news: [news('ready', named('17')), news('checked_in', named('9'))],
      },
      `Cinder Flat: la No. 17 ya se puede recoger. Ya tenemos la No. 9. Ficha 5WN-3KT ${link}`,
    ],
  ])('%s', (_what, given, expected) => {
    expect(wordText(facts(given))).toBe(expected);
  });

  it('counts machines when the names take too much room', () => {
    const machines = Array.from({ length: 12 }, (_, index) => named(`ROOF-CREW-${index + 10}`));
    const text = wordText(facts({ machines, news: machines.map((machine) => news('ready', machine)) }));
    expect(text).toContain('Cinder Flat: your 12 machines are ready.');
  });

  it('never calls a machine ready in a text about another outcome', () => {
    const machines = Array.from({ length: 12 }, (_, index) => named(`ROOF-CREW-${index + 10}`));
    for (const outcome of OUTCOMES.filter((one) => one !== 'repaired')) {
      const given = machines.map((machine) => news('ready_other', machine, { outcome }));
      expect(wordText(facts({ machines, news: given }))).not.toMatch(/(is|are) ready\b/);
    }
  });

  it('drops the weekday where it has a letter outside the short alphabet', () => {
    const saturday = { id: 'v', stubCode: '5WN3KT', arrivesAt: new Date('2026-12-05T16:00:00Z') };
    const text = wordText(facts({ language: 'es', isBooked: true, visit: saturday }));
    expect(text).toContain('el 5 dic, 9:00 am MST');
  });

  it('keeps Spanish words and drops marks from typed names only', () => {
    expect(foldText('Grúa Ñandú Nº 7 “A”')).toBe('Grua Ñandu N 7 "A"');
    const text = wordText(facts({ news: [news('ready', named('Grúa 7'))] }));
    expect(text).toContain('No. Grua 7 is ready.');
  });
});

/** Names as long as the forms allow, the longest name for a shop, the longest address for a link. */
const LONGEST = {
  textName: 'Wide Mesa Repair Shop'.slice(0, 20),
  fleetNumber: 'W'.repeat(12),
  link: 'https://shop.example/t/abcdefghijklmnopqrstuv'.slice(0, 46).padEnd(46, 'x'),
};

function allNews(count: number): [string, MachineNews[], boolean][] {
  const machines = Array.from({ length: count }, (_, index) =>
    named(LONGEST.fleetNumber.slice(0, 10) + String(index + 10)),
  );
  const ofAll = (make: (machine: NamedMachine, index: number) => MachineNews) => machines.map(make);
  const others = OUTCOMES.filter((outcome) => outcome !== 'repaired');
  return [
    ['booked', [], true],
    ...(['checked_in', 'ready', 'cancelled'] as const).map((kind): [string, MachineNews[], boolean] => [
      kind,
      ofAll((machine) => news(kind, machine)),
      false,
    ]),
    ...others.map((outcome): [string, MachineNews[], boolean] => [
      outcome,
      ofAll((machine) => news('ready_other', machine, { outcome })),
      false,
    ]),
    ...PROGRESS.slice(0, 8).map((stage): [string, MachineNews[], boolean] => [
      `corrected to ${stage}`,
      ofAll((machine) => news('corrected', machine, { stage })),
      false,
    ]),
    [
      'everything at once',
      ofAll((machine, index) => {
        const outcome = others[index % others.length] ?? null;
        const kinds = ['ready', 'ready_other', 'checked_in', 'cancelled', 'ready_other'] as const;
        const kind = kinds[index % kinds.length] ?? 'ready';
        return news(kind, machine, { outcome: kind === 'ready_other' ? outcome : null });
      }),
      false,
    ],
  ];
}

describe('one segment, counted by the provider’s own calculator', () => {
  const cases = LANGUAGES.flatMap((language) =>
    [1, 2, 3, 12].flatMap((count) =>
      [false, true].flatMap((isFirst) =>
        allNews(count).map(([what, given, isBooked]) => ({
          language,
          count,
          isFirst,
          what,
          given,
          isBooked,
        })),
      ),
    ),
  );
  it.each(cases)(
    '$language, $count machines, first $isFirst: $what',
    ({ language, count, isFirst, given, isBooked }) => {
      const machines = Array.from({ length: count }, () => named(LONGEST.fleetNumber));
      const base = facts({ language, machines, news: given, isBooked, isFirst, link: LONGEST.link });
      // Wednesday and Saturday are the longest and the accented days; December has the longest date.
      for (const day of ['2026-12-30T17:00:00Z', '2026-12-26T17:00:00Z']) {
        const visit = { id: 'v', stubCode: '5WN3KT', arrivesAt: new Date(day) };
        const text = wordText({ ...base, visit, shop: { ...base.shop, textName: LONGEST.textName } });
        const counted = new SegmentedMessage(text);
        expect([text, counted.encodingName, counted.segmentsCount]).toEqual([text, 'GSM-7', 1]);
        expect(text).toContain(LONGEST.textName);
        expect(text).toContain(LONGEST.link);
      }
    },
  );

  it('still names the outcome of one machine with the longest names in the first text', () => {
    for (const outcome of OUTCOMES.filter((one) => one !== 'repaired')) {
      const given = [news('ready_other', named(LONGEST.fleetNumber), { outcome })];
      const base = facts({ news: given, isFirst: true, link: LONGEST.link });
      expect(wordText({ ...base, shop: { ...base.shop, textName: LONGEST.textName } })).not.toContain(
        'news of',
      );
    }
  });
});

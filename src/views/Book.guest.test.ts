import { describe, expect, it } from 'vitest';
import {
  uuid,
  NOISY,
  REQUEST,
  ELEVEN,
  HALF_PAST_ONE,
  BOOKED,
  BOOK,
  CODES,
  answers,
  settle,
  open,
  press,
  radio,
  field,
  errorOf,
  chooseMachineAndTime,
  fillInWho,
  toTheEnd,
  freshBookPages,
} from '#tests/support/bookPage';
import { pretendServer, refusal } from '#tests/support/mountPage';

const { scrolledTo } = freshBookPages();

describe('a guest', () => {
  it('books with a code, and sees the stub', async () => {
    const requests = pretendServer(answers());
    const { page, router } = await open();
    await toTheEnd(page);
    const asked = requests.find((request) => request.path === CODES);
    expect(asked?.body).toMatchObject({ phone: '+13035550118', purpose: 'book', consent: true });
    await press(page, 'Book it');
    const sent = requests.find((request) => request.path === BOOK);
    expect(sent?.body).toMatchObject({
      arrivesAt: ELEVEN,
      machines: [{ from: 'new', complaintKindId: NOISY, words: 'Knocks when cold' }],
      language: 'en',
      textConsent: true,
      guest: { name: 'Ana Duarte', phone: '+13035550118', requestId: REQUEST, code: '482113' },
    });
    expect(router.currentRoute.value.query.step).toBe('done');
    expect(page.text()).toContain('5WN-3KT');
    expect(page.text()).toContain('Thu 3 Dec, 11:00 am MST');
    expect(page.text()).toContain('wait until the gauge reads zero');
    expect(page.get('a[href="/t/token"]').text()).toBe('Open the stub');
    expect(JSON.stringify(sessionStorage)).not.toContain('Ana Duarte');
  });

  it('loses nothing by a reload, and is not sent a second code for it', async () => {
    const requests = pretendServer(answers());
    const first = await open();
    await toTheEnd(first.page);
    first.page.unmount();
    const { page } = await open('?step=check');
    expect(page.text()).toContain('Knocks when cold');
    expect(page.text()).toContain('Ana Duarte');
    expect(page.text()).toContain('Thu 3 Dec, 11:00 am MST');
    expect(requests.filter((request) => request.path === CODES)).toHaveLength(1);
  });

  it('keeps one key for one intent, over an answer that was lost and a reload', async () => {
    let tries = 0;
    const requests = pretendServer(
      answers({
        [BOOK]: () => ((tries += 1) === 1 ? refusal(503, 'unavailable') : { status: 201, body: BOOKED }),
      }),
    );
    const first = await open();
    await toTheEnd(first.page);
    await press(first.page, 'Book it');
    expect(first.page.text()).toContain('No answer from the shop’s server'.replace('’', "'"));
    first.page.unmount();
    const { page } = await open('?step=check');
    await field(page, 'Six digits').setValue('482113');
    await press(page, 'Book it');
    const keys = requests
      .filter((request) => request.path === BOOK)
      .map((request) => (request.headers as Record<string, string>)['Idempotency-Key']);
    expect(keys).toHaveLength(2);
    expect(keys[0]).toBeTruthy();
    expect(keys[1]).toBe(keys[0]);
  });

  it('is offered the next free times when the chosen one filled up, and books one of them', async () => {
    let tries = 0;
    const full = refusal(409, 'times_full', { details: { half: 'am', next: [HALF_PAST_ONE] } });
    const requests = pretendServer(
      answers({ [BOOK]: () => ((tries += 1) === 1 ? full : { status: 201, body: BOOKED }) }),
    );
    const { page } = await open();
    await toTheEnd(page);
    await press(page, 'Book it');
    expect(page.get('[role="alert"]').text()).toContain('This time has just filled up');
    await press(page, 'Thu 3 Dec, 1:30 pm MST');
    expect(field(page, 'Six digits').element).toHaveProperty('value', '482 113');
    await press(page, 'Book it');
    const bodies = requests.filter((request) => request.path === BOOK).map((request) => request.body);
    expect(bodies[1]).toMatchObject({ arrivesAt: HALF_PAST_ONE, machines: [{ words: 'Knocks when cold' }] });
  });

  it('is told that another code is on its way, and stands in its field', async () => {
    pretendServer(answers());
    const { page } = await open();
    await toTheEnd(page);
    await press(page, 'Send another code');
    expect(page.get('[role="status"]').text()).toBe(
      'A new code is on its way to (303) 555-0118. The one before no longer works.',
    );
    expect(field(page, 'Six digits').element).toHaveProperty('value', '');
    expect(document.activeElement).toBe(field(page, 'Six digits').element);
  });

  it('is brought to what went wrong, from the button at the foot of a phone', async () => {
    pretendServer(answers({ [CODES]: refusal(503, 'unavailable') }));
    const { page } = await open();
    await chooseMachineAndTime(page);
    await press(page, 'Next');
    await fillInWho(page);
    await press(page, 'Text me the code');
    const shown = scrolledTo.mock.contexts.at(-1) as HTMLElement;
    expect(shown.querySelector('[role="alert"]')?.textContent).toContain('No answer from the shop');
  });

  it('reads at the code that it was wrong', async () => {
    pretendServer(answers({ [BOOK]: refusal(400, 'code_wrong') }));
    const { page } = await open();
    await toTheEnd(page);
    await press(page, 'Book it');
    expect(errorOf(page, field(page, 'Six digits'))).toBe(
      'That is not the code. Check the six digits in the text.',
    );
  });

  it('says who he is where several share the phone', async () => {
    const people = [
      { id: uuid(5), name: 'Ana Duarte', account: 'Duarte Roofing' },
      { id: uuid(6), name: 'Luis Duarte', account: 'Duarte Roofing' },
    ];
    let tries = 0;
    const which = refusal(409, 'which_person', { details: { people } });
    const requests = pretendServer(
      answers({ [BOOK]: () => ((tries += 1) === 1 ? which : { status: 201, body: BOOKED }) }),
    );
    const { page } = await open();
    await toTheEnd(page);
    await press(page, 'Book it');
    await (await radio(page, 'Luis Duarte')).setValue();
    await press(page, 'Book it');
    const last = requests.filter((request) => request.path === BOOK).at(-1);
    expect(last?.body).toMatchObject({ guest: { personId: uuid(6) } });
  });

  it('whose phone has said STOP is told how to undo it and whom to call', async () => {
    pretendServer(answers({ [CODES]: refusal(409, 'opted_out') }));
    const { page, router } = await open();
    await chooseMachineAndTime(page);
    await press(page, 'Next');
    await fillInWho(page);
    await press(page, 'Text me the code');
    expect(router.currentRoute.value.query.step).toBe('who');
    expect(page.get('[role="alert"]').text()).toContain('START');
    expect(page.find('[role="alert"] a[href="tel:+13035550142"]').exists()).toBe(true);
  });

  it('reads the consent in Spanish, naming the shop', async () => {
    localStorage.setItem('benchbell.language', 'es');
    pretendServer(answers());
    const { page } = await open();
    await (await radio(page, 'Hace ruido')).setValue();
    await (await radio(page, '11:00 am')).setValue();
    await settle();
    await press(page, 'Sigue');
    const words = page.get('.consent').text();
    expect(words).toContain('Acepto que Cinder Flat envíe mensajes');
    expect(words).toMatch(/STOP.*HELP/);
  });
});

/** Where the stack of this run answers; `globalSetup.ts` has put it there. */
function required(name: string): string {
  const value = process.env[name];
  if (!value) throw new Error(`${name} is not set: run the browser tests with npm test or playwright test`);
  return value;
}

export const web = required('E2E_BASE_URL');
export const sms = required('E2E_SMS_URL');
export const mail = required('E2E_MAIL_URL');
export const clock = required('E2E_CLOCK_URL');

/** The demo shop that the tests work in. */
export const shop = 'cinder-flat';

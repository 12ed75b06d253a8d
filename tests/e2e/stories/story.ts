import type { Page } from '@playwright/test';
import type { Phone } from '../support/phone';
import type { NewMachine } from '../support/booking';
import type { newCustomer } from '../support/people';
import type { Watch } from '../support/watch';

/** What one part of the run hands on to the next. */
export interface Story {
  customer: ReturnType<typeof newCustomer>;
  phone: Phone;
  machines: [NewMachine, NewMachine, NewMachine];
  /** Tag codes as they are written, in the order of the machines. */
  tags: [string, string, string];
  stubCode: string;
  /** When the visit is booked for. */
  arrives: Date;
}

/** The people of the run, each in a browser of their own. */
export interface Cast {
  watch: Watch;
  another: () => Promise<Page>;
}

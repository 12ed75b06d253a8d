/** The main job as one run: who books, who looks, who works, who hears. Nothing but the screens and the phone. */
import { test } from './support/test';
import { findsStub, opensStub } from './stories/crewLead';
import { collects, endsMails, endsTexts, hearsTheBell, writesBack } from './stories/customer';
import { takesIn } from './stories/gate';
import { officeBooks } from './stories/office';
import { readsSheet, repairsByKeyboard, repairsByTap, takesBack, twoAtOnce } from './stories/rail';

test('three machines, from the booking to the bell', async ({ page, another, watch }, info) => {
  test.setTimeout(300_000);
  const { step } = test;
  const cast = { another, watch };
  const story = await step('the office books three machines', () =>
    officeBooks(page, info.project.name === 'phone' ? 'P' : 'D'),
  );
  await step('the crew lead opens the stub from the text', () => opensStub(story));
  await step('and finds it by its code', () => findsStub(story, cast));

  const rosa = await another();
  await step('the gate takes them in', () => takesIn(rosa, story));
  await step('one goes to the bell by tap', () => repairsByTap(rosa, story));
  await step('its sheet shows the text held, then delivered', () => readsSheet(rosa, story));
  await step('the ready text leads to a stub that says so', () => hearsTheBell(story));
  await step('another goes by keyboard', () => repairsByKeyboard(rosa, story));
  await step('a wrong move costs nothing', () => takesBack(rosa, story));
  await step('two at once: one succeeds, the other is told', () => twoAtOnce(rosa, story, cast));
  await step('a text back is shown on Gate', () => writesBack(rosa, story));
  await step('STOP is honoured', () => endsTexts(rosa, story));
  await step('one is collected', () => collects(rosa, story));
  await step('the link in an e-mail ends e-mails', () => endsMails(rosa, story));
});

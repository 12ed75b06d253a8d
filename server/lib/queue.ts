/** The queue as the app sees it: tasks are put in by one database function, in the present unit of work. */
import { run, unitShop } from './db';

/** What tasks carry. A task is a hint to look at the message's row; the row is the truth. */
export interface TaskPayloads {
  send_message: { shopId: string; messageId: string };
}

/** Puts in one task for each message of the present shop. Runs when the unit commits, or never. */
export async function enqueueMessages(messageIds: readonly string[]): Promise<void> {
  if (messageIds.length === 0) return;
  await run(
    `select enqueue('send_message', json_build_object('shopId', $1::text, 'messageId', id))
     from unnest($2::text[]) as id`,
    [unitShop(), messageIds],
  );
}

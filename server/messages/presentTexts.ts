/** Texts from customers as staff see them. Inside a unit of work. */
import { rows } from '#server/lib/db';
import type { InboundTextView } from '#shared/schemas/job';

interface TextRow extends Omit<InboundTextView, 'at'> {
  at: Date;
}

/** Everything that customers wrote about a visit, newest first. */
export function textsOfVisit(visitId: string): Promise<InboundTextView[]> {
  return readTexts('t.visit_id = $1', [visitId]);
}

/** What nobody has answered yet, newest first. */
export function unansweredTexts(): Promise<InboundTextView[]> {
  return readTexts('t.answered_at is null', []);
}

async function readTexts(condition: string, bind: unknown[]): Promise<InboundTextView[]> {
  const found = await rows<TextRow>(
    `select t.id, t.at, t.from_phone as "from", p.name as "personName", a.name as "accountName", t.body, t.kind,
       g.code as tag
     from inbound_texts t
     left join people p on p.shop_id = t.shop_id and p.id = t.person_id
     left join accounts a on a.shop_id = p.shop_id and a.id = p.account_id
     left join tags g on g.shop_id = t.shop_id and g.job_id = t.job_id and g.to_at is null
     where ${condition} order by t.at desc, t.id limit 100`,
    bind,
  );
  return found.map(({ at, ...text }) => ({ ...text, at: at.toISOString() }));
}

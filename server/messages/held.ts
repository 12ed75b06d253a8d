import { rows } from '#server/lib/db';
import type { MoveAnswer } from '#shared/schemas/job';

interface HeldRow {
  personName: string;
  channel: 'text' | 'email';
  releaseAt: Date;
}

/** The notices of a stage event that are held now, for the line "texts Dana in 60 s". Inside a unit of work. */
export async function heldNotices(jobEventId: string): Promise<MoveAnswer['held']> {
  const held = await rows<HeldRow>(
    `select p.name as "personName", n.channel, m.not_before as "releaseAt"
     from notices n
     join messages m on m.shop_id = n.shop_id and m.id = n.message_id
     join people p on p.shop_id = n.shop_id and p.id = n.person_id
     where n.job_event_id = $1 and n.state = 'standing' and m.status = 'pending'
     order by m.not_before, p.name, n.channel`,
    [jobEventId],
  );
  return held.map(({ releaseAt, ...rest }) => ({ ...rest, releaseAt: releaseAt.toISOString() }));
}

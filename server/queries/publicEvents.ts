/**
 * Condition on an event `e` of a job: the public reads it once its grace is over. Left out are events that move nothing,
 * undone ones, and those corrected within their grace, which nobody outside has seen.
 */
export const EVER_PUBLIC = `e.kind in ('booked', 'moved', 'corrected')
      and not exists (
        select 1 from job_events later
        where later.shop_id = e.shop_id and later.job_id = e.job_id and later.seq > e.seq and (
          later.undoes_event_id = e.id
          or (later.kind = 'corrected' and later.at < e.visible_at
            and later.details -> 'takenBack' @> to_jsonb(e.id::text))
        )
      )`;

import { rows } from '#server/lib/db';
import type { Person } from '#server/models/index';
import type { PersonView } from '#shared/schemas/job';

interface TextState {
  person_id: string;
  consent: string | null;
  opted_out: boolean;
}

/** People as staff see them, with how texts to each stand. Inside a unit of work. */
export async function presentPeople(people: Person[]): Promise<PersonView[]> {
  const states = await rows<TextState>(
    `select p.id as person_id,
       (select c.kind from consents c where c.shop_id = p.shop_id and c.person_id = p.id order by c.at desc limit 1) as consent,
       coalesce((select o.opted_out from opt_outs o where o.shop_id = p.shop_id and o.phone = p.phone), false) as opted_out
     from people p where p.id = any($1::uuid[])`,
    [people.map(({ id }) => id)],
  );
  const stateOf = new Map(states.map((state) => [state.person_id, state]));
  return people.map(({ id, name, roles, phone, email, language }) => ({
    id,
    name,
    roles,
    phone,
    email,
    language,
    texts: textsOf(phone, stateOf.get(id)),
  }));
}

function textsOf(phone: string | null, state: TextState | undefined): PersonView['texts'] {
  if (!phone) return 'no_phone';
  if (state?.opted_out) return 'opted_out';
  return state?.consent === 'given' ? 'on' : 'no_consent';
}

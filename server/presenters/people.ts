import { reachOf } from '#server/messages/recipients';
import type { Person } from '#server/models/index';
import type { PersonView } from '#shared/schemas/job';

/** People as staff see them, with how texts to each stand. Inside a unit of work. */
export async function presentPeople(people: readonly Person[]): Promise<PersonView[]> {
  const reach = await reachOf(people);
  return people.map(({ id, name, roles, phone, email, language }) => ({
    ...{ id, name, roles, phone, email, language },
    texts: reach.get(id)?.texts ?? 'no_phone',
  }));
}

import { Op } from 'sequelize';
import { AppError } from '#server/errors';
import { Account, Person } from '#server/models/index';
import type { WhichPersonDetails } from '#shared/schemas/session';

/** The customers who can be reached under a phone. Inside a unit of work. */
export function peopleOfPhone(phone: string): Promise<Person[]> {
  return Person.findAll({
    where: { phone, leftAt: null, accountId: { [Op.ne]: null } },
    order: ['createdAt', 'id'],
  });
}

/**
 * The one person meant, where several share a verified phone.
 * @throws AppError which_person with the choice
 */
export async function whichPerson(people: Person[], chosenId: string | undefined): Promise<Person> {
  const chosen = people.find((person) => person.id === chosenId);
  const only = people.length === 1 ? people[0] : chosen;
  if (only) return only;
  const accounts = await Account.findAll({
    where: { id: people.flatMap((person) => person.accountId ?? []) },
  });
  const nameOf = new Map(accounts.map((account) => [account.id, account.name]));
  const details: WhichPersonDetails = {
    people: people.map(({ id, name, accountId }) => ({
      id,
      name,
      account: nameOf.get(accountId ?? '') ?? '',
    })),
  };
  throw new AppError('which_person', { details });
}

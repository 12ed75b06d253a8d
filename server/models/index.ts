import type { Sequelize } from 'sequelize';
import { Shop } from './Shop';
import { ShopSettings } from './ShopSettings';
import { Closure } from './Closure';
import { ComplaintKind } from './ComplaintKind';
import { Account } from './Account';
import { Crew } from './Crew';
import { Person } from './Person';
import { Machine } from './Machine';
import { Consent } from './Consent';
import { OptOut } from './OptOut';
import { LoginCode } from './LoginCode';
import { PasswordLink } from './PasswordLink';
import { AuditEvent } from './AuditEvent';
import { HalfDay } from './HalfDay';
import { HalfDayEvent } from './HalfDayEvent';
import { Visit } from './Visit';
import { Job } from './Job';
import { Tag } from './Tag';
import { Link } from './Link';
import { JobEvent } from './JobEvent';
import { VisitEvent } from './VisitEvent';
import { SignedLine } from './SignedLine';
import { JobNote } from './JobNote';
import { Message } from './Message';
import { Notice } from './Notice';
import { TextStatus } from './TextStatus';
import { InboundText } from './InboundText';

const models = [
  Shop,
  ShopSettings,
  Closure,
  ComplaintKind,
  Account,
  Crew,
  Person,
  Machine,
  Consent,
  OptOut,
  LoginCode,
  PasswordLink,
  AuditEvent,
  HalfDay,
  HalfDayEvent,
  Visit,
  Job,
  Tag,
  Link,
  JobEvent,
  VisitEvent,
  SignedLine,
  JobNote,
  Message,
  Notice,
  TextStatus,
  InboundText,
];

/**
 * Binds all models to a connection. In the models only `id` is the primary key and associations carry no
 * constraints; keys that begin with the shop live in the migrations.
 */
export function registerModels(sequelize: Sequelize): void {
  for (const model of models) model.register(sequelize);
  const without = { constraints: false };
  Visit.hasMany(Job, { as: 'jobs', foreignKey: 'visitId', ...without });
  Job.belongsTo(Visit, { as: 'visit', foreignKey: 'visitId', ...without });
  Job.belongsTo(Machine, { as: 'machine', foreignKey: 'machineId', ...without });
}

export {
  Shop,
  ShopSettings,
  Closure,
  ComplaintKind,
  Account,
  Crew,
  Person,
  Machine,
  Consent,
  OptOut,
  LoginCode,
  PasswordLink,
  AuditEvent,
  HalfDay,
  HalfDayEvent,
  Visit,
  Job,
  Tag,
  Link,
  JobEvent,
  VisitEvent,
  SignedLine,
  JobNote,
  Message,
  Notice,
  TextStatus,
  InboundText,
};

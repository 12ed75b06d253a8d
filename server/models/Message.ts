import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';
import type { Language } from '#shared/domain/when';

export type MessageStatus =
  'pending' | 'sending' | 'unknown' | 'accepted' | 'failed' | 'withdrawn' | 'overtaken' | 'demo';
export type Delivery = 'queued' | 'sending' | 'sent' | 'delivered' | 'undelivered' | 'failed';

/** What is sent to one person: the truth about one text or e-mail. */
export class Message extends Model<InferAttributes<Message>, InferCreationAttributes<Message>> {
  declare id: string;
  declare shopId: string;
  declare kind: 'notices' | 'code' | 'reply' | 'invite';
  declare channel: 'text' | 'email';
  declare personId: CreationOptional<string | null>;
  declare visitId: CreationOptional<string | null>;
  declare toAddress: string;
  declare language: Language;
  declare mergeable: CreationOptional<boolean>;
  declare status: MessageStatus;
  declare createdAt: Date;
  declare notBefore: Date;
  declare heldFor: CreationOptional<'nothing' | 'grace' | 'quiet_hours'>;
  declare queuedAt: CreationOptional<Date | null>;
  declare subject: CreationOptional<string | null>;
  declare body: CreationOptional<string | null>;
  declare html: CreationOptional<string | null>;
  declare calendar: CreationOptional<string | null>;
  declare attempt: CreationOptional<number>;
  declare claim: CreationOptional<string | null>;
  declare claimedAt: CreationOptional<Date | null>;
  declare claimedBy: CreationOptional<string | null>;
  declare firstClaimedAt: CreationOptional<Date | null>;
  declare lookAfter: CreationOptional<Date | null>;
  declare looksWithoutFind: CreationOptional<number>;
  declare providerId: CreationOptional<string | null>;
  declare delivery: CreationOptional<Delivery | null>;
  declare errorCode: CreationOptional<string | null>;
  declare problem: CreationOptional<string | null>;
  declare settledAt: CreationOptional<Date | null>;

  static register(sequelize: Sequelize): void {
    Message.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true },
        shopId: { type: DataTypes.UUID, allowNull: false },
        kind: { type: DataTypes.TEXT, allowNull: false },
        channel: { type: DataTypes.TEXT, allowNull: false },
        personId: { type: DataTypes.UUID },
        visitId: { type: DataTypes.UUID },
        toAddress: { type: DataTypes.TEXT, allowNull: false },
        language: { type: DataTypes.TEXT, allowNull: false },
        mergeable: { type: DataTypes.BOOLEAN },
        status: { type: DataTypes.TEXT, allowNull: false },
        createdAt: { type: DataTypes.DATE, allowNull: false },
        notBefore: { type: DataTypes.DATE, allowNull: false },
        heldFor: { type: DataTypes.TEXT },
        queuedAt: { type: DataTypes.DATE },
        subject: { type: DataTypes.TEXT },
        body: { type: DataTypes.TEXT },
        html: { type: DataTypes.TEXT },
        calendar: { type: DataTypes.TEXT },
        attempt: { type: DataTypes.INTEGER },
        claim: { type: DataTypes.UUID },
        claimedAt: { type: DataTypes.DATE },
        claimedBy: { type: DataTypes.TEXT },
        firstClaimedAt: { type: DataTypes.DATE },
        lookAfter: { type: DataTypes.DATE },
        looksWithoutFind: { type: DataTypes.INTEGER },
        providerId: { type: DataTypes.TEXT },
        delivery: { type: DataTypes.TEXT },
        errorCode: { type: DataTypes.TEXT },
        problem: { type: DataTypes.TEXT },
        settledAt: { type: DataTypes.DATE },
      },
      { sequelize, tableName: 'messages', underscored: true, timestamps: false },
    );
  }
}

import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';

export type NoticeKind =
  'booked' | 'cancelled' | 'checked_in' | 'ready' | 'ready_other' | 'collected' | 'corrected';

/** One notice to one person about one event by one channel. */
export class Notice extends Model<InferAttributes<Notice>, InferCreationAttributes<Notice>> {
  declare id: string;
  declare shopId: string;
  declare eventId: string;
  declare visitEventId: CreationOptional<string | null>;
  declare jobEventId: CreationOptional<string | null>;
  declare jobId: CreationOptional<string | null>;
  declare visitId: string;
  declare personId: string;
  declare channel: 'text' | 'email';
  declare kind: NoticeKind;
  declare state: CreationOptional<'standing' | 'withdrawn' | 'overtaken'>;
  declare messageId: string;
  declare createdAt: Date;
  declare releaseAt: Date;

  static register(sequelize: Sequelize): void {
    Notice.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true },
        shopId: { type: DataTypes.UUID, allowNull: false },
        eventId: { type: DataTypes.UUID, allowNull: false },
        visitEventId: { type: DataTypes.UUID },
        jobEventId: { type: DataTypes.UUID },
        jobId: { type: DataTypes.UUID },
        visitId: { type: DataTypes.UUID, allowNull: false },
        personId: { type: DataTypes.UUID, allowNull: false },
        channel: { type: DataTypes.TEXT, allowNull: false },
        kind: { type: DataTypes.TEXT, allowNull: false },
        state: { type: DataTypes.TEXT },
        messageId: { type: DataTypes.UUID, allowNull: false },
        createdAt: { type: DataTypes.DATE, allowNull: false },
        releaseAt: { type: DataTypes.DATE, allowNull: false },
      },
      { sequelize, tableName: 'notices', underscored: true, timestamps: false },
    );
  }
}

import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';

/** A text that a customer sent. */
export class InboundText extends Model<InferAttributes<InboundText>, InferCreationAttributes<InboundText>> {
  declare id: string;
  declare shopId: string;
  declare providerId: string;
  declare fromPhone: string;
  declare toPhone: string;
  declare body: string;
  declare kind: 'stop' | 'start' | 'help' | 'maybe_stop' | 'answer' | 'other';
  declare personId: CreationOptional<string | null>;
  declare visitId: CreationOptional<string | null>;
  declare jobId: CreationOptional<string | null>;
  declare at: Date;
  declare answeredAt: CreationOptional<Date | null>;

  static register(sequelize: Sequelize): void {
    InboundText.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true },
        shopId: { type: DataTypes.UUID, allowNull: false },
        providerId: { type: DataTypes.TEXT, allowNull: false },
        fromPhone: { type: DataTypes.TEXT, allowNull: false },
        toPhone: { type: DataTypes.TEXT, allowNull: false },
        body: { type: DataTypes.TEXT, allowNull: false },
        kind: { type: DataTypes.TEXT, allowNull: false },
        personId: { type: DataTypes.UUID },
        visitId: { type: DataTypes.UUID },
        jobId: { type: DataTypes.UUID },
        at: { type: DataTypes.DATE, allowNull: false },
        answeredAt: { type: DataTypes.DATE },
      },
      { sequelize, tableName: 'inbound_texts', underscored: true, timestamps: false },
    );
  }
}

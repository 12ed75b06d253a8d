import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';

/** One status callback of the provider's, kept once. */
export class TextStatus extends Model<InferAttributes<TextStatus>, InferCreationAttributes<TextStatus>> {
  declare id: string;
  declare shopId: string;
  declare providerId: string;
  declare status: string;
  declare errorCode: CreationOptional<string | null>;
  declare messageId: CreationOptional<string | null>;
  declare at: Date;

  static register(sequelize: Sequelize): void {
    TextStatus.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true },
        shopId: { type: DataTypes.UUID, allowNull: false },
        providerId: { type: DataTypes.TEXT, allowNull: false },
        status: { type: DataTypes.TEXT, allowNull: false },
        errorCode: { type: DataTypes.TEXT },
        messageId: { type: DataTypes.UUID },
        at: { type: DataTypes.DATE, allowNull: false },
      },
      { sequelize, tableName: 'text_statuses', underscored: true, timestamps: false },
    );
  }
}

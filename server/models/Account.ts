import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';

/** A customer company, or a person, of one shop. */
export class Account extends Model<InferAttributes<Account>, InferCreationAttributes<Account>> {
  declare id: string;
  declare shopId: string;
  declare name: string;
  declare zone: CreationOptional<string | null>;
  declare createdAt: Date;

  static register(sequelize: Sequelize): void {
    Account.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true },
        shopId: { type: DataTypes.UUID, allowNull: false },
        name: { type: DataTypes.TEXT, allowNull: false },
        zone: { type: DataTypes.TEXT },
        createdAt: { type: DataTypes.DATE, allowNull: false },
      },
      { sequelize, tableName: 'accounts', underscored: true, timestamps: false },
    );
  }
}

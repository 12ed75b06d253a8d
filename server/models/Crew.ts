import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';

/** A part of an account: its lead and its machines. */
export class Crew extends Model<InferAttributes<Crew>, InferCreationAttributes<Crew>> {
  declare id: string;
  declare shopId: string;
  declare accountId: string;
  declare name: string;
  declare leadPersonId: CreationOptional<string | null>;

  static register(sequelize: Sequelize): void {
    Crew.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true },
        shopId: { type: DataTypes.UUID, allowNull: false },
        accountId: { type: DataTypes.UUID, allowNull: false },
        name: { type: DataTypes.TEXT, allowNull: false },
        leadPersonId: { type: DataTypes.UUID },
      },
      { sequelize, tableName: 'crews', underscored: true, timestamps: false },
    );
  }
}

import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';

/** Days on which the shop does not open, first and last included. */
export class Closure extends Model<InferAttributes<Closure>, InferCreationAttributes<Closure>> {
  declare id: string;
  declare shopId: string;
  declare fromDate: string;
  declare toDate: string;
  declare reason: CreationOptional<string>;

  static register(sequelize: Sequelize): void {
    Closure.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true },
        shopId: { type: DataTypes.UUID, allowNull: false },
        fromDate: { type: DataTypes.DATEONLY, allowNull: false },
        toDate: { type: DataTypes.DATEONLY, allowNull: false },
        reason: { type: DataTypes.TEXT },
      },
      { sequelize, tableName: 'closures', underscored: true, timestamps: false },
    );
  }
}

import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';

/** A tenant. Global: the app may only read it. */
export class Shop extends Model<InferAttributes<Shop>, InferCreationAttributes<Shop>> {
  declare id: string;
  declare slug: string;
  declare name: string;
  declare zone: string;
  declare suspendedAt: CreationOptional<Date | null>;

  static register(sequelize: Sequelize): void {
    Shop.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true },
        slug: { type: DataTypes.TEXT, allowNull: false },
        name: { type: DataTypes.TEXT, allowNull: false },
        zone: { type: DataTypes.TEXT, allowNull: false },
        suspendedAt: { type: DataTypes.DATE },
      },
      { sequelize, tableName: 'shops', underscored: true, timestamps: false },
    );
  }
}

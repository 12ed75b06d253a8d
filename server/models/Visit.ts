import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';

/** One booking: a drop-off at a time, with one or more machines. */
export class Visit extends Model<InferAttributes<Visit>, InferCreationAttributes<Visit>> {
  declare id: string;
  declare shopId: string;
  declare accountId: string;
  declare bookedByPersonId: string;
  declare inbound: 'drop_off';
  declare arrivesAt: Date;
  declare stubCode: string;
  declare note: CreationOptional<string>;
  declare createdAt: Date;

  static register(sequelize: Sequelize): void {
    Visit.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true },
        shopId: { type: DataTypes.UUID, allowNull: false },
        accountId: { type: DataTypes.UUID, allowNull: false },
        bookedByPersonId: { type: DataTypes.UUID, allowNull: false },
        inbound: { type: DataTypes.TEXT, allowNull: false },
        arrivesAt: { type: DataTypes.DATE, allowNull: false },
        stubCode: { type: DataTypes.TEXT, allowNull: false },
        note: { type: DataTypes.TEXT },
        createdAt: { type: DataTypes.DATE, allowNull: false },
      },
      { sequelize, tableName: 'visits', underscored: true, timestamps: false },
    );
  }
}

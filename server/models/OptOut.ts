import {
  DataTypes,
  Model,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';

/** Whether a phone has said STOP. */
export class OptOut extends Model<InferAttributes<OptOut>, InferCreationAttributes<OptOut>> {
  declare id: string;
  declare shopId: string;
  declare phone: string;
  declare optedOut: boolean;
  declare source: string;
  declare at: Date;

  static register(sequelize: Sequelize): void {
    OptOut.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true },
        shopId: { type: DataTypes.UUID, allowNull: false },
        phone: { type: DataTypes.TEXT, allowNull: false },
        optedOut: { type: DataTypes.BOOLEAN, allowNull: false },
        source: { type: DataTypes.TEXT, allowNull: false },
        at: { type: DataTypes.DATE, allowNull: false },
      },
      { sequelize, tableName: 'opt_outs', underscored: true, timestamps: false },
    );
  }
}

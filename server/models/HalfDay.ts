import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';
import type { Half } from '#shared/domain/hours';

/** Room for machines in one half-day. */
export class HalfDay extends Model<InferAttributes<HalfDay>, InferCreationAttributes<HalfDay>> {
  declare id: string;
  declare shopId: string;
  declare day: string;
  declare half: Half;
  declare places: number;
  declare over: CreationOptional<number>;
  declare taken: CreationOptional<number>;

  static register(sequelize: Sequelize): void {
    HalfDay.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true },
        shopId: { type: DataTypes.UUID, allowNull: false },
        day: { type: DataTypes.DATEONLY, allowNull: false },
        half: { type: DataTypes.TEXT, allowNull: false },
        places: { type: DataTypes.INTEGER, allowNull: false },
        over: { type: DataTypes.INTEGER },
        taken: { type: DataTypes.INTEGER },
      },
      { sequelize, tableName: 'half_days', underscored: true, timestamps: false },
    );
  }
}

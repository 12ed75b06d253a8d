import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';

/** Why a half-day holds more than its places. Append-only. */
export class HalfDayEvent extends Model<
  InferAttributes<HalfDayEvent>,
  InferCreationAttributes<HalfDayEvent>
> {
  declare id: string;
  declare shopId: string;
  declare halfDayId: string;
  declare kind: 'over_raised';
  declare at: Date;
  declare personId: CreationOptional<string | null>;
  declare byName: string;
  declare reason: string;
  declare places: number;

  static register(sequelize: Sequelize): void {
    HalfDayEvent.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true },
        shopId: { type: DataTypes.UUID, allowNull: false },
        halfDayId: { type: DataTypes.UUID, allowNull: false },
        kind: { type: DataTypes.TEXT, allowNull: false },
        at: { type: DataTypes.DATE, allowNull: false },
        personId: { type: DataTypes.UUID },
        byName: { type: DataTypes.TEXT, allowNull: false },
        reason: { type: DataTypes.TEXT, allowNull: false },
        places: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, tableName: 'half_day_events', underscored: true, timestamps: false },
    );
  }
}

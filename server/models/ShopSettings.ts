import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';
import type { WeekHours } from '#shared/domain/hours';
import type { Stage } from '#shared/domain/stages';

/** A shop's own settings, under row security. */
export class ShopSettings extends Model<
  InferAttributes<ShopSettings>,
  InferCreationAttributes<ShopSettings>
> {
  declare id: string;
  declare shopId: string;
  declare phone: string;
  declare email: string;
  declare address: string;
  declare gateNoteEn: CreationOptional<string>;
  declare gateNoteEs: CreationOptional<string>;
  declare aboutEn: CreationOptional<string>;
  declare aboutEs: CreationOptional<string>;
  declare textName: string;
  declare hours: WeekHours;
  declare arrivalTimes: string[];
  declare placesPerHalfDay: number;
  declare pegs: CreationOptional<Partial<Record<Stage, number>>>;
  declare graceSeconds: CreationOptional<number>;
  declare quietFrom: CreationOptional<string>;
  declare quietTo: CreationOptional<string>;
  declare unpaidLimitCents: CreationOptional<number>;
  declare codesPerDay: CreationOptional<number>;
  declare sending: CreationOptional<boolean>;

  static register(sequelize: Sequelize): void {
    ShopSettings.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true },
        shopId: { type: DataTypes.UUID, allowNull: false },
        phone: { type: DataTypes.TEXT, allowNull: false },
        email: { type: DataTypes.TEXT, allowNull: false },
        address: { type: DataTypes.TEXT, allowNull: false },
        gateNoteEn: { type: DataTypes.TEXT },
        gateNoteEs: { type: DataTypes.TEXT },
        aboutEn: { type: DataTypes.TEXT },
        aboutEs: { type: DataTypes.TEXT },
        textName: { type: DataTypes.TEXT, allowNull: false },
        hours: { type: DataTypes.JSONB, allowNull: false },
        arrivalTimes: { type: DataTypes.ARRAY(DataTypes.TEXT), allowNull: false },
        placesPerHalfDay: { type: DataTypes.INTEGER, allowNull: false },
        pegs: { type: DataTypes.JSONB },
        graceSeconds: { type: DataTypes.INTEGER },
        quietFrom: { type: DataTypes.TEXT },
        quietTo: { type: DataTypes.TEXT },
        unpaidLimitCents: { type: DataTypes.INTEGER },
        codesPerDay: { type: DataTypes.INTEGER },
        sending: { type: DataTypes.BOOLEAN },
      },
      { sequelize, tableName: 'shop_settings', underscored: true, timestamps: false },
    );
  }
}

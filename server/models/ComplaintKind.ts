import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';

/** One entry of the shop's list of what can be wrong, in both languages. */
export class ComplaintKind extends Model<
  InferAttributes<ComplaintKind>,
  InferCreationAttributes<ComplaintKind>
> {
  declare id: string;
  declare shopId: string;
  declare key: string;
  declare labelEn: string;
  declare labelEs: string;
  declare position: CreationOptional<number>;
  declare active: CreationOptional<boolean>;

  static register(sequelize: Sequelize): void {
    ComplaintKind.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true },
        shopId: { type: DataTypes.UUID, allowNull: false },
        key: { type: DataTypes.TEXT, allowNull: false },
        labelEn: { type: DataTypes.TEXT, allowNull: false },
        labelEs: { type: DataTypes.TEXT, allowNull: false },
        position: { type: DataTypes.INTEGER },
        active: { type: DataTypes.BOOLEAN },
      },
      { sequelize, tableName: 'complaint_kinds', underscored: true, timestamps: false },
    );
  }
}

import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';

/** A tag code, with the job it hangs on; a blank has none. */
export class Tag extends Model<InferAttributes<Tag>, InferCreationAttributes<Tag>> {
  declare id: string;
  declare shopId: string;
  declare code: string;
  declare jobId: CreationOptional<string | null>;
  declare fromAt: Date;
  declare toAt: CreationOptional<Date | null>;

  static register(sequelize: Sequelize): void {
    Tag.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true },
        shopId: { type: DataTypes.UUID, allowNull: false },
        code: { type: DataTypes.TEXT, allowNull: false },
        jobId: { type: DataTypes.UUID },
        fromAt: { type: DataTypes.DATE, allowNull: false },
        toAt: { type: DataTypes.DATE },
      },
      { sequelize, tableName: 'tags', underscored: true, timestamps: false },
    );
  }
}

import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';
import type { Outcome, PartsReason, Stage } from '#shared/domain/stages';

/** One machine's stay at the shop. */
export class Job extends Model<InferAttributes<Job>, InferCreationAttributes<Job>> {
  declare id: string;
  declare shopId: string;
  declare visitId: string;
  declare machineId: string;
  declare ownerAccountId: string;
  declare billedAccountId: string;
  declare broughtByPersonId: CreationOptional<string | null>;
  declare broughtByName: CreationOptional<string>;
  declare complaintKindId: string;
  declare words: CreationOptional<string>;
  declare leftWithIt: CreationOptional<string>;
  declare halfDayId: CreationOptional<string | null>;
  declare stage: Stage;
  declare stageSince: Date;
  declare outcome: CreationOptional<Outcome | null>;
  declare partsReason: CreationOptional<PartsReason | null>;
  declare rush: CreationOptional<boolean>;
  declare version: CreationOptional<number>;
  declare createdAt: Date;

  static register(sequelize: Sequelize): void {
    Job.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true },
        shopId: { type: DataTypes.UUID, allowNull: false },
        visitId: { type: DataTypes.UUID, allowNull: false },
        machineId: { type: DataTypes.UUID, allowNull: false },
        ownerAccountId: { type: DataTypes.UUID, allowNull: false },
        billedAccountId: { type: DataTypes.UUID, allowNull: false },
        broughtByPersonId: { type: DataTypes.UUID },
        broughtByName: { type: DataTypes.TEXT },
        complaintKindId: { type: DataTypes.UUID, allowNull: false },
        words: { type: DataTypes.TEXT },
        leftWithIt: { type: DataTypes.TEXT },
        halfDayId: { type: DataTypes.UUID },
        stage: { type: DataTypes.TEXT, allowNull: false },
        stageSince: { type: DataTypes.DATE, allowNull: false },
        outcome: { type: DataTypes.TEXT },
        partsReason: { type: DataTypes.TEXT },
        rush: { type: DataTypes.BOOLEAN },
        version: { type: DataTypes.INTEGER },
        createdAt: { type: DataTypes.DATE, allowNull: false },
      },
      { sequelize, tableName: 'jobs', underscored: true, timestamps: false },
    );
  }
}

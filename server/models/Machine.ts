import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';
import type { MachineKind } from '#shared/domain/machineKinds';

/** One piece of equipment of an account. Volumes and pressures in SI. */
export class Machine extends Model<InferAttributes<Machine>, InferCreationAttributes<Machine>> {
  declare id: string;
  declare shopId: string;
  declare accountId: string;
  declare crewId: CreationOptional<string | null>;
  declare kind: MachineKind;
  declare maker: CreationOptional<string>;
  declare model: CreationOptional<string>;
  declare serial: CreationOptional<string>;
  declare fleetNumber: CreationOptional<string>;
  declare engineClass: CreationOptional<string>;
  declare tankLitres: CreationOptional<string | null>;
  declare unloadKpa: CreationOptional<string | null>;
  declare reloadKpa: CreationOptional<string | null>;
  declare createdAt: Date;

  static register(sequelize: Sequelize): void {
    Machine.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true },
        shopId: { type: DataTypes.UUID, allowNull: false },
        accountId: { type: DataTypes.UUID, allowNull: false },
        crewId: { type: DataTypes.UUID },
        kind: { type: DataTypes.TEXT, allowNull: false },
        maker: { type: DataTypes.TEXT },
        model: { type: DataTypes.TEXT },
        serial: { type: DataTypes.TEXT },
        fleetNumber: { type: DataTypes.TEXT },
        engineClass: { type: DataTypes.TEXT },
        tankLitres: { type: DataTypes.DECIMAL(8, 2) },
        unloadKpa: { type: DataTypes.DECIMAL(8, 2) },
        reloadKpa: { type: DataTypes.DECIMAL(8, 2) },
        createdAt: { type: DataTypes.DATE, allowNull: false },
      },
      { sequelize, tableName: 'machines', underscored: true, timestamps: false },
    );
  }
}

import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';
import type { GuardKey } from '#shared/domain/stages';

/** A guard met, or gone on without, by a signed line. Append-only. */
export class SignedLine extends Model<InferAttributes<SignedLine>, InferCreationAttributes<SignedLine>> {
  declare id: string;
  declare shopId: string;
  declare jobId: string;
  declare eventId: string;
  declare guard: GuardKey;
  declare mode: 'met' | 'without';
  declare how: CreationOptional<string>;
  declare leftOut: CreationOptional<string>;
  declare why: CreationOptional<string>;
  declare amountCents: CreationOptional<number | null>;
  declare at: Date;
  declare personId: string;
  declare byName: string;

  static register(sequelize: Sequelize): void {
    SignedLine.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true },
        shopId: { type: DataTypes.UUID, allowNull: false },
        jobId: { type: DataTypes.UUID, allowNull: false },
        eventId: { type: DataTypes.UUID, allowNull: false },
        guard: { type: DataTypes.TEXT, allowNull: false },
        mode: { type: DataTypes.TEXT, allowNull: false },
        how: { type: DataTypes.TEXT },
        leftOut: { type: DataTypes.TEXT },
        why: { type: DataTypes.TEXT },
        amountCents: { type: DataTypes.INTEGER },
        at: { type: DataTypes.DATE, allowNull: false },
        personId: { type: DataTypes.UUID, allowNull: false },
        byName: { type: DataTypes.TEXT, allowNull: false },
      },
      { sequelize, tableName: 'signed_lines', underscored: true, timestamps: false },
    );
  }
}

import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';

/** A sign-in, a refusal, an opt-out: what matters and is no change of a job. Append-only. */
export class AuditEvent extends Model<InferAttributes<AuditEvent>, InferCreationAttributes<AuditEvent>> {
  declare id: string;
  declare shopId: string;
  declare kind: string;
  declare at: Date;
  declare personId: CreationOptional<string | null>;
  declare ip: CreationOptional<string>;
  declare details: CreationOptional<Record<string, unknown>>;

  static register(sequelize: Sequelize): void {
    AuditEvent.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true },
        shopId: { type: DataTypes.UUID, allowNull: false },
        kind: { type: DataTypes.TEXT, allowNull: false },
        at: { type: DataTypes.DATE, allowNull: false },
        personId: { type: DataTypes.UUID },
        ip: { type: DataTypes.TEXT },
        details: { type: DataTypes.JSONB },
      },
      { sequelize, tableName: 'audit_events', underscored: true, timestamps: false },
    );
  }
}

import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';

/** Booked, moved or cancelled. Append-only. */
export class VisitEvent extends Model<InferAttributes<VisitEvent>, InferCreationAttributes<VisitEvent>> {
  declare id: string;
  declare shopId: string;
  declare visitId: string;
  declare kind: 'booked' | 'moved' | 'cancelled';
  declare at: Date;
  declare visibleAt: Date;
  declare personId: CreationOptional<string | null>;
  declare byName: string;
  declare jobEventId: CreationOptional<string | null>;
  declare details: CreationOptional<Record<string, unknown>>;

  static register(sequelize: Sequelize): void {
    VisitEvent.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true },
        shopId: { type: DataTypes.UUID, allowNull: false },
        visitId: { type: DataTypes.UUID, allowNull: false },
        kind: { type: DataTypes.TEXT, allowNull: false },
        at: { type: DataTypes.DATE, allowNull: false },
        visibleAt: { type: DataTypes.DATE, allowNull: false },
        personId: { type: DataTypes.UUID },
        byName: { type: DataTypes.TEXT, allowNull: false },
        jobEventId: { type: DataTypes.UUID },
        details: { type: DataTypes.JSONB },
      },
      { sequelize, tableName: 'visit_events', underscored: true, timestamps: false },
    );
  }
}

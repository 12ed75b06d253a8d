import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';
import type { Outcome, PartsReason, Stage } from '#shared/domain/stages';

/** What happened to a job. Append-only; the public reads it from `visibleAt` on. */
export class JobEvent extends Model<InferAttributes<JobEvent>, InferCreationAttributes<JobEvent>> {
  declare id: string;
  declare shopId: string;
  declare jobId: string;
  declare seq: number;
  declare kind: 'booked' | 'moved' | 'undone' | 'corrected' | 'tag_replaced';
  declare fromStage: CreationOptional<Stage | null>;
  declare toStage: CreationOptional<Stage | null>;
  declare outcome: CreationOptional<Outcome | null>;
  declare partsReason: CreationOptional<PartsReason | null>;
  declare at: Date;
  declare visibleAt: Date;
  declare personId: CreationOptional<string | null>;
  declare byName: string;
  declare undoesEventId: CreationOptional<string | null>;
  declare reason: CreationOptional<string>;
  declare details: CreationOptional<Record<string, unknown>>;

  static register(sequelize: Sequelize): void {
    JobEvent.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true },
        shopId: { type: DataTypes.UUID, allowNull: false },
        jobId: { type: DataTypes.UUID, allowNull: false },
        seq: { type: DataTypes.INTEGER, allowNull: false },
        kind: { type: DataTypes.TEXT, allowNull: false },
        fromStage: { type: DataTypes.TEXT },
        toStage: { type: DataTypes.TEXT },
        outcome: { type: DataTypes.TEXT },
        partsReason: { type: DataTypes.TEXT },
        at: { type: DataTypes.DATE, allowNull: false },
        visibleAt: { type: DataTypes.DATE, allowNull: false },
        personId: { type: DataTypes.UUID },
        byName: { type: DataTypes.TEXT, allowNull: false },
        undoesEventId: { type: DataTypes.UUID },
        reason: { type: DataTypes.TEXT },
        details: { type: DataTypes.JSONB },
      },
      { sequelize, tableName: 'job_events', underscored: true, timestamps: false },
    );
  }
}

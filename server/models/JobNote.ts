import {
  DataTypes,
  Model,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';

/** A note for the shop only. Append-only. */
export class JobNote extends Model<InferAttributes<JobNote>, InferCreationAttributes<JobNote>> {
  declare id: string;
  declare shopId: string;
  declare jobId: string;
  declare body: string;
  declare at: Date;
  declare personId: string;
  declare byName: string;

  static register(sequelize: Sequelize): void {
    JobNote.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true },
        shopId: { type: DataTypes.UUID, allowNull: false },
        jobId: { type: DataTypes.UUID, allowNull: false },
        body: { type: DataTypes.TEXT, allowNull: false },
        at: { type: DataTypes.DATE, allowNull: false },
        personId: { type: DataTypes.UUID, allowNull: false },
        byName: { type: DataTypes.TEXT, allowNull: false },
      },
      { sequelize, tableName: 'job_notes', underscored: true, timestamps: false },
    );
  }
}

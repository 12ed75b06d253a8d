import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';

/** One person's link to the stub of a visit; the token itself is not stored. */
export class Link extends Model<InferAttributes<Link>, InferCreationAttributes<Link>> {
  declare id: string;
  declare shopId: string;
  declare visitId: string;
  declare personId: CreationOptional<string | null>;
  declare purpose: 'text' | 'email' | 'screen' | 'found' | 'paper';
  declare tokenHash: string;
  declare createdAt: Date;
  declare revokedAt: CreationOptional<Date | null>;

  static register(sequelize: Sequelize): void {
    Link.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true },
        shopId: { type: DataTypes.UUID, allowNull: false },
        visitId: { type: DataTypes.UUID, allowNull: false },
        personId: { type: DataTypes.UUID },
        purpose: { type: DataTypes.TEXT, allowNull: false },
        tokenHash: { type: DataTypes.TEXT, allowNull: false },
        createdAt: { type: DataTypes.DATE, allowNull: false },
        revokedAt: { type: DataTypes.DATE },
      },
      { sequelize, tableName: 'links', underscored: true, timestamps: false },
    );
  }
}

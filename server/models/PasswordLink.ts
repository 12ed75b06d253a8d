import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';

/** A one-time link by which a person of the shop sets a password. */
export class PasswordLink extends Model<
  InferAttributes<PasswordLink>,
  InferCreationAttributes<PasswordLink>
> {
  declare id: string;
  declare shopId: string;
  declare personId: string;
  declare tokenHash: string;
  declare createdAt: Date;
  declare expiresAt: Date;
  declare usedAt: CreationOptional<Date | null>;

  static register(sequelize: Sequelize): void {
    PasswordLink.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true },
        shopId: { type: DataTypes.UUID, allowNull: false },
        personId: { type: DataTypes.UUID, allowNull: false },
        tokenHash: { type: DataTypes.TEXT, allowNull: false },
        createdAt: { type: DataTypes.DATE, allowNull: false },
        expiresAt: { type: DataTypes.DATE, allowNull: false },
        usedAt: { type: DataTypes.DATE },
      },
      { sequelize, tableName: 'password_links', underscored: true, timestamps: false },
    );
  }
}

import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';
import type { Role } from '#shared/domain/roles';
import type { Language } from '#shared/domain/when';

/** Somebody of the shop (no account) or of a customer (one account). */
export class Person extends Model<InferAttributes<Person>, InferCreationAttributes<Person>> {
  declare id: string;
  declare shopId: string;
  declare accountId: CreationOptional<string | null>;
  declare crewId: CreationOptional<string | null>;
  declare name: string;
  declare phone: CreationOptional<string | null>;
  declare phoneProvedAt: CreationOptional<Date | null>;
  declare email: CreationOptional<string | null>;
  declare emailStoppedAt: CreationOptional<Date | null>;
  declare passwordHash: CreationOptional<string | null>;
  declare roles: Role[];
  declare language: CreationOptional<Language>;
  declare zone: CreationOptional<string | null>;
  declare approvalLimitCents: CreationOptional<number | null>;
  declare lastActedAt: CreationOptional<Date | null>;
  declare leftAt: CreationOptional<Date | null>;
  declare createdAt: Date;

  static register(sequelize: Sequelize): void {
    Person.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true },
        shopId: { type: DataTypes.UUID, allowNull: false },
        accountId: { type: DataTypes.UUID },
        crewId: { type: DataTypes.UUID },
        name: { type: DataTypes.TEXT, allowNull: false },
        phone: { type: DataTypes.TEXT },
        phoneProvedAt: { type: DataTypes.DATE },
        email: { type: DataTypes.TEXT },
        emailStoppedAt: { type: DataTypes.DATE },
        passwordHash: { type: DataTypes.TEXT },
        roles: { type: DataTypes.ARRAY(DataTypes.TEXT), allowNull: false },
        language: { type: DataTypes.TEXT },
        zone: { type: DataTypes.TEXT },
        approvalLimitCents: { type: DataTypes.INTEGER },
        lastActedAt: { type: DataTypes.DATE },
        leftAt: { type: DataTypes.DATE },
        createdAt: { type: DataTypes.DATE, allowNull: false },
      },
      { sequelize, tableName: 'people', underscored: true, timestamps: false },
    );
  }
}

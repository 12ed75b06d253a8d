import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';
import type { Language } from '#shared/domain/when';

/** A six-digit code sent to a phone; only its HMAC is kept. */
export class LoginCode extends Model<InferAttributes<LoginCode>, InferCreationAttributes<LoginCode>> {
  declare id: string;
  declare shopId: string;
  declare phone: string;
  declare purpose: 'book' | 'sign_in';
  declare codeHmac: string;
  declare consent: CreationOptional<boolean>;
  declare language: Language;
  declare ip: CreationOptional<string>;
  declare createdAt: Date;
  declare expiresAt: Date;
  declare checks: CreationOptional<number>;
  declare usedAt: CreationOptional<Date | null>;

  static register(sequelize: Sequelize): void {
    LoginCode.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true },
        shopId: { type: DataTypes.UUID, allowNull: false },
        phone: { type: DataTypes.TEXT, allowNull: false },
        purpose: { type: DataTypes.TEXT, allowNull: false },
        codeHmac: { type: DataTypes.TEXT, allowNull: false },
        consent: { type: DataTypes.BOOLEAN },
        language: { type: DataTypes.TEXT, allowNull: false },
        ip: { type: DataTypes.TEXT },
        createdAt: { type: DataTypes.DATE, allowNull: false },
        expiresAt: { type: DataTypes.DATE, allowNull: false },
        checks: { type: DataTypes.INTEGER },
        usedAt: { type: DataTypes.DATE },
      },
      { sequelize, tableName: 'login_codes', underscored: true, timestamps: false },
    );
  }
}

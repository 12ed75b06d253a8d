import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';
import type { Language } from '#shared/domain/when';

/** What a person agreed to or withdrew, in which words, when and from where. Append-only. */
export class Consent extends Model<InferAttributes<Consent>, InferCreationAttributes<Consent>> {
  declare id: string;
  declare shopId: string;
  declare personId: string;
  declare phone: string;
  declare kind: 'given' | 'withdrawn';
  declare wording: string;
  declare language: Language;
  declare source: string;
  declare ip: CreationOptional<string>;
  declare at: Date;

  static register(sequelize: Sequelize): void {
    Consent.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true },
        shopId: { type: DataTypes.UUID, allowNull: false },
        personId: { type: DataTypes.UUID, allowNull: false },
        phone: { type: DataTypes.TEXT, allowNull: false },
        kind: { type: DataTypes.TEXT, allowNull: false },
        wording: { type: DataTypes.TEXT, allowNull: false },
        language: { type: DataTypes.TEXT, allowNull: false },
        source: { type: DataTypes.TEXT, allowNull: false },
        ip: { type: DataTypes.TEXT },
        at: { type: DataTypes.DATE, allowNull: false },
      },
      { sequelize, tableName: 'consents', underscored: true, timestamps: false },
    );
  }
}

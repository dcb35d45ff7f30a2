import { Model, type Sequelize } from 'sequelize';
import type { Price } from '@shared/features/finance/finance.contract';
import type { CareerStage } from '@shared/features/accounts/accounts.contract';
import {
  at,
  integer,
  json,
  key,
  optionalAt,
  optionalInteger,
  optionalText,
  text,
  version,
} from '@server/db/columns';

export class FeeCategoryRow extends Model {
  declare id: string;
  declare eventId: string;
  declare name: string;
  declare stages: CareerStage[];
  declare earlyMinor: number | null;
  declare earlyUntil: string | null;
  declare regularMinor: number;
  declare taxBasisPoints: number;
  declare position: number;
  declare removedAt: Date | null;
}

export class ExtraRow extends Model {
  declare id: string;
  declare eventId: string;
  declare name: string;
  declare priceMinor: number;
  declare capacity: number | null;
  declare until: string | null;
  declare taxBasisPoints: number;
  declare hint: string;
  declare position: number;
  declare removedAt: Date | null;
}

export class OrderRow extends Model {
  declare id: string;
  declare number: string;
  declare eventId: string;
  declare registrationId: string;
  declare accountId: string;
  declare state: 'placed' | 'paid' | 'expired' | 'cancelled';
  declare currency: string;
  declare totalMinor: number;
  declare price: Price;
  declare reservedUntil: Date | null;
  declare paidAt: Date | null;
  declare lastFailure: string | null;
  declare oddity: string | null;
  declare version: number;
  declare createdAt: Date;
}

export class OrderLineRow extends Model {
  declare id: string;
  declare orderId: string;
  declare kind: string;
  declare refId: string;
  declare quantity: number;
  declare netMinor: number;
}

export class PaymentRow extends Model {
  declare id: string;
  declare orderId: string;
  declare provider: string;
  declare providerId: string;
  declare amountMinor: number;
  declare currency: string;
  declare state: 'pending' | 'paid' | 'failed';
  declare version: number;
  declare createdAt: Date;
}

export class ProviderEventRow extends Model {
  declare id: string;
  declare type: string;
  declare effect: string;
}

export class JournalEntryRow extends Model {
  declare id: string;
  declare voucher: string;
  declare memo: string;
  declare currency: string;
  declare posted: number;
  declare at: Date;
}

export class JournalLineRow extends Model {
  declare id: string;
  declare entryId: string;
  declare account: string;
  declare debitMinor: number;
  declare creditMinor: number;
}

export function initialiseFinance(sequelize: Sequelize): void {
  FeeCategoryRow.init(
    {
      id: key(),
      eventId: text(),
      name: text(),
      stages: json(),
      earlyMinor: optionalInteger(),
      earlyUntil: optionalText(),
      regularMinor: integer(),
      taxBasisPoints: integer(0),
      position: integer(),
      removedAt: optionalAt(),
    },
    { sequelize, modelName: 'fee_categories' },
  );
  ExtraRow.init(
    {
      id: key(),
      eventId: text(),
      name: text(),
      priceMinor: integer(),
      capacity: optionalInteger(),
      until: optionalText(),
      taxBasisPoints: integer(0),
      hint: text(''),
      position: integer(),
      removedAt: optionalAt(),
    },
    { sequelize, modelName: 'extras' },
  );
  OrderRow.init(
    {
      id: key(),
      number: text(),
      eventId: text(),
      registrationId: text(),
      accountId: text(),
      state: text('placed'),
      currency: text(),
      totalMinor: integer(),
      price: json(),
      reservedUntil: optionalAt(),
      paidAt: optionalAt(),
      lastFailure: optionalText(),
      oddity: optionalText(),
      version: version(),
    },
    { sequelize, modelName: 'orders', version: true },
  );
  OrderLineRow.init(
    { id: key(), orderId: text(), kind: text(), refId: text(), quantity: integer(), netMinor: integer() },
    { sequelize, modelName: 'order_lines' },
  );
  PaymentRow.init(
    {
      id: key(),
      orderId: text(),
      provider: text(),
      providerId: text(),
      amountMinor: integer(),
      currency: text(),
      state: text('pending'),
      version: version(),
    },
    { sequelize, modelName: 'payments', version: true },
  );
  ProviderEventRow.init(
    { id: key(), type: text(), effect: text() },
    { sequelize, modelName: 'provider_events' },
  );
  JournalEntryRow.init(
    { id: key(), voucher: text(), memo: text(), currency: text(), posted: integer(0), at: at() },
    { sequelize, modelName: 'journal_entries', timestamps: false },
  );
  JournalLineRow.init(
    { id: key(), entryId: text(), account: text(), debitMinor: integer(), creditMinor: integer() },
    { sequelize, modelName: 'journal_lines', timestamps: false },
  );
}

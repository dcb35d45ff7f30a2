import { Model, type Sequelize } from 'sequelize';
import type {
  ApplicationState,
  Diet,
  RegistrationInput,
  RegistrationState,
} from '@shared/features/registration/registration.contract';
import { json, key, optionalAt, optionalText, text, version } from '@server/db/columns';

export class RegistrationRow extends Model {
  declare id: string;
  declare eventId: string;
  declare accountId: string;
  /** For badges and the desk; eight characters. */
  declare code: string;
  declare state: RegistrationState;
  declare categoryId: string;
  declare arrivesOn: string | null;
  declare leavesOn: string | null;
  declare badgeName: string;
  declare diet: Diet;
  declare allergies: string;
  declare needs: string;
  declare invoice: RegistrationInput['invoice'];
  declare checkedInAt: Date | null;
  declare checkedInBy: string | null;
  declare version: number;
  declare createdAt: Date;
}

export class ApplicationRow extends Model {
  declare id: string;
  declare eventId: string;
  declare accountId: string;
  declare state: ApplicationState;
  declare motivation: string;
  declare background: string;
  declare answerBy: Date | null;
  declare note: string;
  declare version: number;
  declare createdAt: Date;
}

export function initialiseRegistration(sequelize: Sequelize): void {
  RegistrationRow.init(
    {
      id: key(),
      eventId: text(),
      accountId: text(),
      code: text(),
      state: text(),
      categoryId: text(),
      arrivesOn: optionalText(),
      leavesOn: optionalText(),
      badgeName: text(),
      diet: text(),
      allergies: text(''),
      needs: text(''),
      invoice: json(),
      checkedInAt: optionalAt(),
      checkedInBy: optionalText(),
      version: version(),
    },
    { sequelize, modelName: 'registrations', version: true },
  );
  ApplicationRow.init(
    {
      id: key(),
      eventId: text(),
      accountId: text(),
      state: text(),
      motivation: text(),
      background: text(),
      answerBy: optionalAt(),
      note: text(''),
      version: version(),
    },
    { sequelize, modelName: 'applications', version: true },
  );
}

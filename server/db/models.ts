import { sequelize } from './connection';
import { initialiseJobs } from '../jobs/job';
import { initialiseMessages } from '../mail/message.model';
import { initialiseAccounts } from '../features/accounts/accounts.model';
import { initialiseEvents } from '../features/events/events.model';
import { initialiseFinance } from '../features/finance/finance.model';
import { initialiseRegistration } from '../features/registration/registration.model';
import { initialiseGrants } from '../features/grants/grants.model';
import { initialiseMessagesFeature } from '../features/messages/messages.model';
import { initialiseTalks } from '../features/talks/talks.model';
import { initialiseProgramme } from '../features/programme/programme.model';

/** All models and their associations: one line per feature, lower features first. */
export function initialiseModels(): void {
  initialiseJobs(sequelize);
  initialiseMessages(sequelize);
  initialiseAccounts(sequelize);
  initialiseEvents(sequelize);
  initialiseTalks(sequelize);
  initialiseProgramme(sequelize);
  initialiseFinance(sequelize);
  initialiseRegistration(sequelize);
  initialiseGrants(sequelize);
  initialiseMessagesFeature(sequelize);
}

initialiseModels();

import { DataTypes, Model, type Sequelize } from 'sequelize';
import { afterCommit } from '../db/transaction';
import { newId } from '../db/id';

/** A row of work: a fact that was announced, or one reaction to it. */
export class JobRow extends Model {
  declare id: string;
  /** `fact:<name>` or `reaction:<name>` or the name of a scheduled job. */
  declare name: string;
  declare payload: unknown;
  /** The same key is queued once. */
  declare key: string;
  declare state: 'queued' | 'running' | 'done' | 'failed';
  declare attempts: number;
  declare runAt: Date;
  declare lastError: string | null;
}

export function initialiseJobs(sequelize: Sequelize): void {
  JobRow.init(
    {
      id: { type: DataTypes.TEXT, primaryKey: true },
      name: { type: DataTypes.TEXT, allowNull: false },
      payload: { type: DataTypes.JSON, allowNull: false },
      key: { type: DataTypes.TEXT, allowNull: false },
      state: { type: DataTypes.TEXT, allowNull: false, defaultValue: 'queued' },
      attempts: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
      runAt: { type: DataTypes.DATE, allowNull: false },
      lastError: { type: DataTypes.TEXT },
    },
    { sequelize, modelName: 'jobs', tableName: 'jobs' },
  );
}

/** A fact in the past tense with the shape of what it tells. */
export interface Fact<P> {
  readonly name: string;
  /** Only for the type. */
  readonly payload?: P;
}

export const defineFact = <P extends object>(name: string): Fact<P> => ({ name });

/** One reaction to a fact. It may run more than once (at least once, never zero times): make it idempotent. */
export interface Reaction<P = never> {
  readonly fact: Fact<P>;
  /** Unique per fact: part of the job's key. */
  readonly name: string;
  react(payload: P, job: { id: string }): Promise<void>;
}

export const on = <P>(fact: Fact<P>, name: string, react: Reaction<P>['react']): Reaction<P> => ({
  fact,
  name,
  react,
});

const listeners = new Set<() => void>();
/** The worker asks to be woken when something was queued. */
export function onQueued(listener: () => void): void {
  listeners.add(listener);
}
export function wake(): void {
  for (const listener of listeners) listener();
}

/** Announces a fact inside the ambient transaction: it becomes true, and its reactions due, exactly when that commits. */
export async function announce<P extends object>(fact: Fact<P>, payload: P): Promise<void> {
  const id = newId();
  await JobRow.create({ id, name: `fact:${fact.name}`, payload, key: id, runAt: new Date() });
  afterCommit(wake);
}

import { DataTypes, Model, type ModelAttributeColumnOptions, type ModelStatic } from 'sequelize';
import { sequelize } from '../db.ts';

/** A column: what it is in the database, and the TypeScript type it reads as. */
export interface Column<T, Given extends boolean = boolean> {
  readonly options: ModelAttributeColumnOptions;
  /** Never read at run time: carries the type, and whether the database fills the column when it is left out. */
  readonly type?: T;
  readonly given?: Given;
}

const column = <T>(options: ModelAttributeColumnOptions): Column<T, false> => ({ options: { allowNull: false, ...options } });

/** Makes a column accept null, and be null when left out. */
export const nullable = <T>(inner: Column<T>): Column<T | null, true> => ({ options: { ...inner.options, allowNull: true } });
/** A column that the database fills when it is left out (a default, an identity). */
export const filled = <T>(inner: Column<T>): Column<T, true> => ({ options: { ...inner.options, allowNull: true } });

/** The table's own id, made by the database unless given. */
export const id = (): Column<string, true> => ({ options: { type: DataTypes.UUID, primaryKey: true, defaultValue: DataTypes.UUIDV4 } });
/** An id made by the caller. */
export const givenId = (): Column<string, false> => column({ type: DataTypes.UUID, primaryKey: true });
export const keyText = (): Column<string, false> => column({ type: DataTypes.TEXT, primaryKey: true });
export const keyRef = (): Column<string, false> => column({ type: DataTypes.UUID, primaryKey: true });
export const keyWhole = (): Column<number, false> => column({ type: DataTypes.INTEGER, primaryKey: true });
export const identity = (): Column<number, true> => ({ options: { type: DataTypes.INTEGER, allowNull: true } });
export const ref = (): Column<string, false> => column({ type: DataTypes.UUID });
export const text = <T extends string = string>(): Column<T, false> => column({ type: DataTypes.TEXT });
export const whole = (): Column<number, false> => column({ type: DataTypes.INTEGER });
export const real = (): Column<number, false> => column({ type: DataTypes.DOUBLE });
export const yes = (): Column<boolean, false> => column({ type: DataTypes.BOOLEAN });
/** An instant. */
export const instant = (): Column<Date, false> => column({ type: DataTypes.DATE });
/** A day, as `2026-12-01`, without a time zone. */
export const day = (): Column<string, false> => column({ type: DataTypes.DATEONLY });
/** A time of day, as `08:00:00`. */
export const timeOfDay = (): Column<string, false> => column({ type: DataTypes.TIME });
export const json = <T>(): Column<T, false> => column({ type: DataTypes.JSONB });
export const texts = <T extends string = string>(): Column<T[], false> => column({ type: DataTypes.ARRAY(DataTypes.TEXT) });
export const wholes = (): Column<number[], false> => column({ type: DataTypes.ARRAY(DataTypes.INTEGER) });
export const days = (): Column<string[], false> => column({ type: DataTypes.ARRAY(DataTypes.DATEONLY) });
/** A point as GeoJSON: `{ type: 'Point', coordinates: [lng, lat] }`. */
export interface GeoPoint {
  readonly type: 'Point';
  readonly coordinates: readonly [lng: number, lat: number];
}
export const point = (): Column<GeoPoint, false> => column({ type: DataTypes.GEOGRAPHY('POINT', 4326) });

type Columns = Readonly<Record<string, Column<unknown>>>;
type Attributes<C extends Columns> = { -readonly [K in keyof C]: C[K] extends Column<infer T> ? T : never };
type LeftOut<C extends Columns> = { [K in keyof C]: C[K]['given'] extends true | undefined ? K : never }[keyof C];
type Creation<C extends Columns> = Omit<Attributes<C>, LeftOut<C>> & Partial<Pick<Attributes<C>, LeftOut<C>>>;

/** A row of a table, with its columns as properties in camel case. */
export type Row<M> = M extends ModelStatic<infer Instance> ? Instance : never;

/**
 * Declares a table's columns once: the model's attributes, its types and the snake-case columns follow from them.
 * Columns only; deeds live in `commands`, reading in `queries`.
 */
export function table<const C extends Columns>(
  name: string,
  columns: C,
): ModelStatic<Model<Attributes<C>, Creation<C>> & Attributes<C>> {
  const options = Object.fromEntries(Object.entries(columns).map(([key, value]) => [key, value.options]));
  return sequelize.define(name, options as never, { tableName: name, modelName: name }) as unknown as ModelStatic<Model<Attributes<C>, Creation<C>> & Attributes<C>>;
}

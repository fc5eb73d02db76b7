/**
 * The only place where SQL text goes to the database. Always with a query type: without one the driver's answer to a
 * SELECT cannot be taken apart. Values are named (`:name`); arrays expand for `IN (:ids)`, arrays of arrays for
 * `VALUES :rows`.
 */
import { QueryTypes } from 'sequelize'
import type { Sequelize, Transaction } from 'sequelize'

export type SqlValue = string | number | boolean | Date | Buffer | null | SqlValue[]
export type SqlValues = Record<string, SqlValue>

/** Rows of a SELECT, or of `INSERT … RETURNING` and `DELETE … RETURNING`. */
export const select = <Row extends object>(
  sequelize: Sequelize,
  sql: string,
  values: SqlValues = {},
  transaction?: Transaction,
): Promise<Row[]> =>
  sequelize.query<Row>(sql, {
    type: QueryTypes.SELECT,
    raw: true,
    ...(Object.keys(values).length > 0 && { replacements: values }),
    ...(transaction && { transaction }),
  })

/** Any other statement; answers how many rows it changed (0 for a change of the schema). */
export const execute = (
  sequelize: Sequelize,
  sql: string,
  values: SqlValues = {},
  transaction?: Transaction,
): Promise<number> =>
  sequelize.query(sql, {
    type: QueryTypes.BULKUPDATE,
    ...(Object.keys(values).length > 0 && { replacements: values }),
    ...(transaction && { transaction }),
  })

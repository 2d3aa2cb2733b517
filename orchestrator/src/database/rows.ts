import type { EntityManager, EntityTarget, FindOptionsWhere, ObjectLiteral } from 'typeorm';

/**
 * Inserts one whole row. TypeORM's own type for rows cannot express documents with members of unknown type,
 * and lets columns be left out; this one takes the row as the entity says it.
 */
export async function insertRow<Row extends ObjectLiteral>(
  manager: EntityManager,
  entity: EntityTarget<Row>,
  row: Row,
): Promise<void> {
  await manager.insert(entity, row);
}

/** Changes the given columns of the rows that match. */
export async function updateRow<Row extends ObjectLiteral>(
  manager: EntityManager,
  entity: EntityTarget<Row>,
  where: FindOptionsWhere<Row>,
  columns: Partial<Row>,
): Promise<void> {
  await manager.update(entity, where, columns);
}

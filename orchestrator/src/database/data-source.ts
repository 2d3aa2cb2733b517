import { DataSource } from 'typeorm';
import { dataSourceOptions } from './data-source-options.js';

/** For TypeORM's command line, which wants a data source as the module's export. */
export const dataSource = new DataSource(dataSourceOptions(process.env.CRESTHOLD_DATA ?? 'data'));

import { DataSource } from 'typeorm';
import { AuditEntryEntity } from './entities/audit-entry.ts';
import { CampaignEntity } from './entities/campaign.ts';
import { CaptureChunkEntity } from './entities/capture-chunk.ts';
import { CaptureEntity } from './entities/capture.ts';
import { EstimateEntity } from './entities/estimate.ts';
import { LabEntity } from './entities/lab.ts';
import { MembershipEntity } from './entities/membership.ts';
import { SnakeCaseNames } from './entities/naming.ts';
import { PersonEntity } from './entities/person.ts';
import { TokenEntity } from './entities/token.ts';
import { TraceEntity } from './entities/trace.ts';
import { WorkerHeartbeatEntity } from './entities/worker-heartbeat.ts';
import { CreateSpine1764590400000 } from './migrations/1764590400000-create-spine.ts';

/** The one description of the database: entities, migrations, pool. Never synchronises. */
export function createDataSource(databaseUrl: string, poolSize = 20): DataSource {
  return new DataSource({
    type: 'postgres',
    url: databaseUrl,
    entities: [
      LabEntity,
      PersonEntity,
      MembershipEntity,
      TokenEntity,
      CampaignEntity,
      EstimateEntity,
      CaptureEntity,
      CaptureChunkEntity,
      TraceEntity,
      WorkerHeartbeatEntity,
      AuditEntryEntity,
    ],
    migrations: [CreateSpine1764590400000],
    migrationsTableName: 'migration',
    migrationsTransactionMode: 'each',
    namingStrategy: new SnakeCaseNames(),
    synchronize: false,
    logging: false,
    poolSize,
    connectTimeoutMS: 5000,
    applicationName: 'perhertz',
    poolErrorHandler: () => {},
    installExtensions: false,
  });
}

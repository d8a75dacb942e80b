import { DefaultNamingStrategy } from 'typeorm';

/** Columns in snake_case, so that SQL needs no quotes. */
export class SnakeCaseNames extends DefaultNamingStrategy {
  override columnName(propertyName: string, customName: string | undefined): string {
    return customName ?? propertyName.replace(/[A-Z]/g, (letter) => `_${letter.toLowerCase()}`);
  }
}

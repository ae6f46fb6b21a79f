import { eq } from 'drizzle-orm';
import type { Database } from './database';
import { workshop } from './schema';

/** The one workshop of this server. */
export class WorkshopStore {
  constructor(private readonly db: Database) {}

  get(): { name: string; demo: boolean } {
    return this.db.select().from(workshop).get() ?? { name: '', demo: false };
  }

  set(name: string, demo: boolean): void {
    this.db
      .insert(workshop)
      .values({ id: 1, name, demo })
      .onConflictDoUpdate({ target: workshop.id, set: { name, demo } })
      .run();
  }

  rename(name: string): void {
    this.db.update(workshop).set({ name }).where(eq(workshop.id, 1)).run();
  }
}

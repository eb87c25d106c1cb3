// What every panel is given.
import type { Client } from "../engine/client";
import type { Pool } from "../engine/pool";
import type { State } from "../state";

export interface Page {
  state: State;
  client: Client;
  /** Workers for studies, so that a study does not keep single flights waiting. */
  studies: Pool;
}

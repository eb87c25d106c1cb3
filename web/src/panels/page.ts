// What every panel is given.
import type { Client } from "../engine/client";
import type { State } from "../state";

export interface Page {
  state: State;
  client: Client;
}

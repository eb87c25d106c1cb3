// Cautions in plain sight, and what computed the page.
import { h, part } from "../dom";
import type { Page } from "./page";

export function mountFooter({ client }: Page): void {
  part("footer").append(
    h(
      "p",
      {},
      h("strong", {}, "Preliminary study only."),
      " Not for flight operations, navigation or range safety. Local law and licensed practice decide. Times are TDB, about 69 s ahead of UTC.",
    ),
    h("p", { class: "help" }, `Sunreach ${client.about.program().version}. Everything is computed in this browser; nothing you enter leaves it.`),
  );
}

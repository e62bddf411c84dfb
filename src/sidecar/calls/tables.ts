import { couplet } from "../../gen/couplet.js";
import { CAUTIONS } from "../../tables/cautions.js";
import { producerName } from "../../version.js";
import { familiesOf } from "../families.js";
import type { ServedCouplings, ServedDecays } from "../served.js";
import { type Method, method, type Snapshot } from "./method.js";

import v1 = couplet.v1;

/** `ListTables`: what is served, and within which limits. */
export const listTables: Method = method(
  "ListTables",
  false,
  v1.ListTablesRequest,
  v1.ListTablesResponse,
  ({ served, limits, refusedReplacement }: Snapshot) => ({
    message: {
      producer: producerName(),
      cautions: [...CAUTIONS],
      tables: [...served.decays.map(decaysMessage), ...served.couplings.map(couplingsMessage)],
      limits: { ...limits },
      refusedReplacement,
    },
  }),
);

/** `GetDecayTable`: one parent's rows with their daughters. */
export const getDecayTable: Method = method(
  "GetDecayTable",
  false,
  v1.GetDecayTableRequest,
  v1.GetDecayTableResponse,
  ({ served }: Snapshot, request) => {
    const { table, message, daughters } = served.parent(request.parent);
    return {
      message: {
        tableSha256: table.sha256,
        convention: table.message.header.convention,
        parent: message,
        daughters: [...daughters],
      },
    };
  },
);

function decaysMessage(table: ServedDecays): v1.ServedTable.$Properties {
  return {
    ...listed(table),
    parents: table.message.parents.map(({ hadron, rows }) => ({
      name: hadron.name,
      mcNumber: hadron.mcNumber,
      rows: rows.length,
    })),
  };
}

function couplingsMessage(table: ServedCouplings): v1.ServedTable.$Properties {
  return { ...listed(table), families: familiesOf(table.message) };
}

function listed({ file, sha256, message }: ServedDecays | ServedCouplings): v1.ServedTable.$Properties {
  return { file, sha256, kind: message.kind, header: { ...message.header, studyText: "" } };
}

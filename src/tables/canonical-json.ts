import type * as protobuf from "protobufjs";

/**
 * Canonical ProtoJSON of a message: lowerCamelCase names, enums by name, fields with presence printed even when 0.
 *
 * @param type - full name of the message, e.g. `couplet.v1.FactorTable`
 * @param message - a message of the generated module, or a plain object of its shape
 */
export function canonicalJson(type: string, message: object): unknown {
  return canonicalJsonOf(type)(message);
}

/** `canonicalJson` for many messages of one type: the schema is read once. */
export function canonicalJsonOf(type: string): (message: object) => unknown {
  const { Root } = require("protobufjs") as typeof protobuf;
  const { toJson } = require("protobufjs/ext/protojson") as typeof import("protobufjs/ext/protojson");
  const messageType = Root.fromJSON(require("../gen/schema.json") as protobuf.INamespace).lookupType(type);
  return (message) => toJson(messageType, message as protobuf.Message);
}

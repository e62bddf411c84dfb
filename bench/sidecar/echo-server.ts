// The rival of the sidecar's bench: an echo service on the same library, as plain as its documentation shows one. It
// decodes a message of bytes and encodes another of a given size.
//
//     ts-node -T bench/sidecar/echo-server.ts REPLY_BYTES     prints its port
import { Server, ServerCredentials } from "@grpc/grpc-js";
import { parse } from "protobufjs";

const { root } = parse(
  'syntax = "proto3"; message EchoRequest { bytes payload = 1; } message EchoResponse { bytes payload = 1; }',
);
const EchoRequest = root.lookupType("EchoRequest");
const EchoResponse = root.lookupType("EchoResponse");

/** Bytes of payload that make a message of a size: the rest is its tag and its length. */
export function payloadBytes(messageBytes: number): number {
  return messageBytes - (messageBytes < 130 ? 2 : messageBytes < 16_387 ? 3 : 4);
}

function method(path: string, streaming: boolean) {
  return {
    path,
    requestStream: streaming,
    responseStream: streaming,
    requestSerialize: (message: object) => Buffer.from(EchoRequest.encode(message).finish()),
    requestDeserialize: (bytes: Buffer) => EchoRequest.decode(bytes),
    responseSerialize: (message: object) => EchoResponse.encode(message).finish() as Buffer,
    responseDeserialize: (bytes: Buffer) => EchoResponse.decode(bytes),
  };
}

if (require.main === module) {
  const payload = Buffer.alloc(payloadBytes(Number(process.argv[2])), 1);
  const server = new Server();
  server.addService(
    { Echo: method("/echo.Echo/Echo", false), EchoStream: method("/echo.Echo/EchoStream", true) },
    {
      Echo: (_call: unknown, respond: (error: null, message: object) => void) => respond(null, { payload }),
      EchoStream: (call: NodeJS.ReadWriteStream) => {
        call.on("data", () => call.write({ payload } as unknown as string));
        call.on("end", () => call.end());
      },
    },
  );
  server.bindAsync("127.0.0.1:0", ServerCredentials.createInsecure(), (_error, port) => {
    process.stdout.write(`${port}\n`);
  });
}

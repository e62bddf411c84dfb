// Load on one gRPC method, the same bytes again and again, by the JavaScript client; prints one line of JSON.
//
//     ts-node -T bench/sidecar/load-client.ts ADDRESS PATH unary|stream CONCURRENCY SECONDS REQUEST_HEX
import { performance } from "node:perf_hooks";
import { Client, credentials } from "@grpc/grpc-js";

const [address, path, mode, concurrencyText, secondsText, hex] = process.argv.slice(2) as string[];
const concurrency = Number(concurrencyText);
const seconds = Number(secondsText);
const request = Buffer.from(hex!, "hex");
const same = (bytes: Buffer) => bytes;
const client = new Client(address!, credentials.createInsecure());
const WARM_UP_SECONDS = 1;

const latencies: number[] = [];
let answers = 0;
const start = performance.now() + 1000 * WARM_UP_SECONDS;
const end = start + 1000 * seconds;

function note(began: number): boolean {
  const now = performance.now();
  answers++;
  if (began >= start && now <= end) latencies.push(now - began);
  return now < end;
}

function unary(done: () => void): void {
  const began = performance.now();
  client.makeUnaryRequest(path!, same, same, request, (error) => {
    if (error !== null) throw error;
    if (note(began)) unary(done);
    else done();
  });
}

function stream(done: () => void): void {
  const call = client.makeBidiStreamRequest(path!, same, same);
  const began: number[] = [];
  const ask = () => {
    began.push(performance.now());
    call.write(request);
  };
  let left = concurrency;
  call.on("data", () => {
    if (note(began.shift()!)) ask();
    else if (--left === 0) {
      call.end();
      done();
    }
  });
  for (let k = 0; k < concurrency; k++) ask();
}

function finish(): void {
  latencies.sort((a, b) => a - b);
  const at = (q: number) => latencies[Math.min(latencies.length - 1, Math.floor(q * latencies.length))] ?? 0;
  process.stdout.write(
    `${JSON.stringify({ perSecond: latencies.length / seconds, p50Ms: at(0.5), p99Ms: at(0.99), answers })}\n`,
  );
  client.close();
}

if (mode === "stream") stream(finish);
else {
  let open = concurrency;
  for (let k = 0; k < concurrency; k++) {
    unary(() => {
      if (--open === 0) finish();
    });
  }
}

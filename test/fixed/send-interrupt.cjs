// Preloaded into `couplet serve`: sends SIGINT to the process itself while the command's modules are being loaded.
const Module = require("node:module");

const load = Module._load;
Module._load = function (name, ...rest) {
  if (name === "pino") process.kill(process.pid, "SIGINT");
  return load.call(this, name, ...rest);
};

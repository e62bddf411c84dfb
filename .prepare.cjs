// npm runs this after an install. Without the development packages (`npm ci --omit=dev`) there is nothing to build with.
const { execSync } = require("node:child_process");
const { existsSync } = require("node:fs");

if (existsSync("node_modules/typescript")) execSync("npm run build", { stdio: "inherit" });

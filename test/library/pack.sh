#!/usr/bin/env bash
# The package as its users get it: packs the tarball from the built dist/, checks it with publint and are-the-types-wrong,
# installs it into an empty project, and uses it under CommonJS, under ECMAScript modules and from TypeScript.
# Needs `npm run build` before; the registry is asked for the run-time dependencies only.
set -euo pipefail
cd "$(dirname "$0")/../.."
here=$PWD
work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT

[ -f dist/index.js ] || { echo "dist/ is missing: run npm run build first" >&2; exit 1; }
npm pack --ignore-scripts --silent --pack-destination "$work" >/dev/null
tarball=$(echo "$work"/couplet-*.tgz)

# What must be in it, and what must not.
tar -tzf "$tarball" >"$work/files"
for wanted in package/dist/index.js package/dist/index.d.ts package/dist/cli/main.js package/dist/gen/couplet.js \
  package/dist/gen/schema.json package/proto/couplet/v1/decays.proto package/src/clients/python/couplet_decays.py; do
  grep -qx "$wanted" "$work/files" || { echo "missing from the package: $wanted" >&2; exit 1; }
done
if grep -E '^package/(test|bench|node_modules|\.ci|coverage)/|\.test\.|\.tsbuildinfo' "$work/files"; then
  echo "these do not belong in the package" >&2
  exit 1
fi
# Every file the clients need is under src/clients, and nothing else of src.
if grep '^package/src/' "$work/files" | grep -v '^package/src/clients/'; then
  echo "only src/clients of src belongs in the package" >&2
  exit 1
fi

npx --no-install publint run --strict "$tarball"
# The package needs Node 20.19, which reads `exports`; the resolution of Node 10 does not, and is left out.
npx --no-install attw "$tarball" --no-emoji --profile node16

mkdir "$work/empty"
cd "$work/empty"
echo '{ "name": "empty", "private": true }' >package.json
npm install --no-audit --no-fund --prefer-offline --loglevel=error "$tarball" 2>"$work/install.log"
if [ -s "$work/install.log" ]; then
  cat "$work/install.log" >&2
  exit 1
fi
cp "$here/test/library/use.cjs" "$here/test/library/use.mjs" "$here/test/library/short.yaml" .
cp "$here/test/library/use-types.ts" .
node use.cjs
node use.mjs
[ "$(npx --no-install couplet product 3 3 3 | sed -n 1p)" = '3 x 3 x 3 = 1 + 2*8 + 10' ]
npx --no-install couplet fit short.yaml >/dev/null
# The types, as strict users of both module systems see them, with no other type package installed than the library's own.
for module in node16 node20; do
  "$here/node_modules/.bin/tsc" --noEmit --strict --exactOptionalPropertyTypes --skipLibCheck false --target es2022 \
    --module "$module" use-types.ts
done
echo "the packed library installs and works: $(wc -l <"$work/files") files"

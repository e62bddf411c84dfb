import { isoscalarTable } from "../src/su3/isoscalar-factors.js";
import { irrepsUpTo } from "../test/support/irreps-up-to.js";
import { ladderCopies, ladderProduct } from "../test/support/ladder-table.js";
import { formatRoot } from "../src/exact/signed-root.js";
import { irrepName } from "../src/su3/irrep.js";
let n=0, bad=0, products=0, multi=0; const t0=performance.now();
const lim=Number(process.argv[2]);
const list=irrepsUpTo(lim);
for (const left of list) for (const right of list) {
  if (left.p+left.q<lim && right.p+right.q<lim && lim>3) continue;
  products++;
  const product=ladderProduct(left,right);
  const t=isoscalarTable(left,right);
  const eng=new Map<string,string>(); for (const f of t.factors()) eng.set(`${irrepName(f.irrep)}#${f.copy}:${f.threeY},${f.twoI}|${f.threeY1},${f.twoI1},${f.threeY2},${f.twoI2}`, formatRoot(f.value));
  let m=0;
  for (const {irrep,multiplicity} of t.series) { if(multiplicity>1) multi++; ladderCopies(product,irrep).forEach((c,i)=>{ for (const [k,v] of c){ n++; m++; if (eng.get(`${irrepName(irrep)}#${i+1}:${k}`)!==v) bad++; }});}
  if (m!==eng.size) {bad++; console.log("size",m,eng.size)}
}
console.log({products,n,bad,multi,ms:performance.now()-t0});

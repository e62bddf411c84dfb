import { isoscalarTable } from "../src/su3/isoscalar-factors.js";
import { parseIrrep } from "../src/su3/irrep.js";
const cases = process.argv.slice(2);
for (const c of cases) {
  const [a,b]=c.split("x").map(parseIrrep) as any;
  let best=[1e9,1e9,1e9], n=0, big=0;
  const big6 = a.p>=5;
  for (let k=0,t00=performance.now();k<(big6?2:200)&&performance.now()-t00<4000;k++){
    const t0=performance.now(); const t=isoscalarTable(a,b); const t1=performance.now(); const cols=t.columns(); const t2=performance.now(); const ds=t.doubles(); const t3=performance.now();
    if(k===0) console.log(c,"cold",(t1-t0).toFixed(1),(t2-t1).toFixed(1),(t3-t2).toFixed(1));
    best=[Math.min(best[0]!,t1-t0),Math.min(best[1]!,t2-t1),Math.min(best[2]!,t3-t2)]; n=cols.sign.length; big=cols.big.size;
  }
  console.log(c,n,"big",big,"solve",best[0]!.toFixed(3),"finish",best[1]!.toFixed(3),"doubles",best[2]!.toFixed(3),"us/factor solve+finish",((best[0]!+best[1]!)*1e3/n).toFixed(3), "rss", (process.memoryUsage().rss/1e6).toFixed(0));
}

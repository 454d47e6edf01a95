import { openSession } from "./src/solving/index.js";
import { readScene } from "./src/scene/index.js";
const C=299.792458;
for (const off of [0,0.02,0.05,0.1,0.2,0.3,0.4,0.5,0.6,0.7,0.8,0.9,0.95,0.99]) {
  const r = readScene({ format:"heddle-scene",version:1,name:"b",polarization:"TMz",section:{widthMm:16,heightMm:16},band:{fromGHz:12,toGHz:24},mesh:{cellMm:0.5},background:"pec",
   edges:{left:"electric",right:"electric",bottom:"electric",top:"electric"},
   paint:[{id:"b",kind:"rectangle",x:2-off*0.5,y:2-0.5*off,width:11+off,height:11+off,medium:"air"}],
   sources:[{id:"w",kind:"line",x:5.3,y:6.1}],probes:[{id:"p",kind:"point",x:9.2,y:8.4,field:"Ez"}],stop:{maxTimeNs:30,decayDb:300}},{purpose:"run"});
  if(!r.ok){console.log(r.problems);continue;}
  const s = await openSession(r.scene,{engine:"reference"} as never); s.advance(1e7); const res=s.result();
  const exact=C/2*Math.hypot(1,1)/(11+off);
  const best=res.resonances!.map(q=>q.GHz).reduce((b,g)=>Math.abs(g-exact)<Math.abs(b-exact)?g:b,0);
  console.log(off,(best/exact-1).toExponential(2)); s.dispose();
}

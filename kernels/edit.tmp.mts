import { openSession } from "./src/solving/index.js";
import { readScene } from "./src/scene/index.js";
const n = 1024;
const base = (pol: string, metal: boolean, extra: object[]) => ({
  format: "heddle-scene", version: 1, name: "b", polarization: pol, section: { widthMm: n, heightMm: n }, band: { fromGHz: 5, toGHz: 14 }, mesh: { cellMm: 1 },
  edges: { left: "absorbing", right: "absorbing", bottom: "absorbing", top: "absorbing" },
  media: [{ id: "lining", name: "Lining", conductivity: 0.5 }],
  paint: [...(metal ? [{ id: "box", kind: "polygon", points: [[200,200],[800,210],[800,800],[200,800]], holes: [[[215,215],[785,225],[785,785],[215,785]]], medium: "pec" },{id:"disk",kind:"ellipse",x:500,y:500,rx:100,ry:80,medium:"pec"}] : []), ...extra],
  sources: [{ id: "w", kind: "line", x: 600.5, y: 300.5, waveform: { kind: "tone", GHz: 10 } }], probes: [], stop: { maxTimeNs: 200, decayDb: 300 } });
const slab = { id: "s", kind: "rectangle", x: 100, y: 100, width: 200, height: 820, medium: "lining" };
const stroke = { id: "k", kind: "stroke", points: [[400,300],[450,330],[500,310]], widthMm: 20, medium: "lining" };
for (const pol of ["TMz","TEz"]) for (const metal of [false,true]) for (const [nm, e] of [["slab",slab],["stroke",stroke]] as const) {
  const r = readScene(base(pol, metal, []), { purpose: "run" }); if (!r.ok) { console.log(r.problems); continue; }
  const s = await openSession(r.scene, { engine: "wasm" } as never);
  s.advance(20);
  const t: number[] = [];
  for (let i = 0; i < 6; i++) { const r2 = readScene(base(pol, metal, i % 2 === 0 ? [e] : []), { purpose: "run" }); if (!r2.ok) throw 1; const a = performance.now(); const o = s.edit(r2.scene); t.push(performance.now() - a); if (o.kind!=="applied") console.log(o); }
  const b = performance.now(); s.sampleField({ quantity: pol === "TMz" ? "Ez" : "Hz", width: 1024, height: 1024 } as never); const sm = performance.now() - b;
  console.log(pol, metal ? "metal" : "plain", nm, t.map((x) => x.toFixed(0)).join(" "), "sample", sm.toFixed(0));
  s.dispose();
}

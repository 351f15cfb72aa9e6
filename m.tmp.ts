import { createUpload } from '@/lib/services/uploads/create';
import { systemRuntime } from '@/lib/runtime';
import fs from 'node:fs';
const KEY=JSON.parse(fs.readFileSync('/tmp/demo.json','utf8')).key;
let seed=Date.now()%10000;const rnd=()=>{seed=(seed*1664525+1013904223)%4294967296;return seed/4294967296};const g=()=>Math.sqrt(-2*Math.log(rnd()+1e-12))*Math.cos(2*Math.PI*rnd());
const st={e:1000,n:2000,h:51.5,o:0.7};const pts:any[]=[];
for(let i=0;i<4;i++){const az=i*Math.PI/2+0.3,d=80+20*i;pts.push({name:'P'+i,easting:st.e+d*Math.sin(az),northing:st.n+d*Math.cos(az),elevation:50+i})}
const D=180/Math.PI;const W=(x:number)=>((x%360)+360)%360;
function setup(id:string){const shots=[];for(const q of pts)for(const face of['left','right']){const E=q.easting-st.e,N=q.northing-st.n,dh=q.elevation+1.5-st.h,DD=Math.hypot(E,N),R=6371008.8;const Y=DD*(1+dh/R),X=dh-DD*DD/2/R;const z=(Math.atan2(Y,X)-.13*DD/2/R)*D+g()*0.0004;const h=(Math.atan2(E,N)-st.o)*D+g()*.0004;
shots.push({clientId:q.name+face,target:q.name,face,horizontal:W(h+(face==='right'?180:0)),zenith:face==='left'?z:360-z,slopeDistance:Math.hypot(X,Y)+g()*.001,targetHeight:1.5,prismConstantMm:0,prismConstantAppliedMm:0,appliedPpm:0})}
return {clientId:id,station:'ST-1',method:'resection',instrument:'TS-2',instrumentHeight:1.6,observedAt:'2026-12-01T08:00:00Z',atmosphere:{temperature:20,pressure:1007},shots}}
import pg from 'pg';
const c=new pg.Client('postgres://postgres@127.0.0.1:5544/hubtack');await c.connect();
const pid=(await c.query("select project_id from setups order by created_at desc limit 1")).rows[0].project_id;await c.end();
const doc=(id:string)=>Buffer.from(JSON.stringify({clientId:'u-'+id,units:{length:'m',angle:'deg',temperature:'C',pressure:'hPa'},setups:[setup('s-'+id)]}));
import {callerTransaction,credential} from '@/lib/access/identify';
import { AsyncLocalStorage } from 'node:async_hooks';
const als=new AsyncLocalStorage();
const input={params:{projectId:pid},query:{}} as any;
const one0=async(bytes:Buffer)=>{const raw:any={bytes,mediaType:'application/json',charset:null,contentEncoding:null};const prepared=await createUpload.prepare(raw);
 return callerTransaction(credential('key',KEY),new Date(),async(tenant,identified)=>{const ahead=createUpload.ahead(tenant,input,prepared);const caller=await identified;return createUpload.run({runtime:systemRuntime,requestId:'r',address:'a',idempotency:null,caller,tenant} as any,{...input,raw},prepared,ahead)})};
const one=process.env.ALS==='1'?(b:Buffer)=>als.run({},()=>one0(b)):one0;
for(let k=0;k<8;k++){const docs=Array.from({length:1000},(_,i)=>doc(k+'-'+i+'-'+Date.now()));let i=0;const u=process.cpuUsage();const t=performance.now();await Promise.all(Array.from({length:16},async()=>{while(i<1000)await one(docs[i++])}));const v=process.cpuUsage(u);console.log('cpu ms',((v.user+v.system)/1e6).toFixed(2),'rps',(1e6/(performance.now()-t)).toFixed(0));}
process.exit(0);

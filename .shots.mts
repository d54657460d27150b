import { chromium } from 'playwright-core'; import { readFileSync } from 'node:fs'; import { AxeBuilder } from '@axe-core/playwright';
const base='http://127.0.0.1:8123'; const pw=readFileSync('/tmp/pw/storage/demo-accounts.txt','utf8').split('\n')[0]!.trim().split(/\s+/).pop()!;
const who = process.argv[2] ?? 'marit'; const widths=(process.argv[3]??'1440').split(',').map(Number); const themes=(process.argv[4]??'light').split(','); const only=process.argv[5];
const b=await chromium.launch({executablePath:'/usr/bin/chromium',args:['--no-sandbox','--disable-gpu','--disable-background-networking']});
for (const theme of themes) for (const w of widths) {
 const c=await b.newContext({viewport:{width:w,height:w<500?844:900},colorScheme:theme as any, deviceScaleFactor:1}); const p=await c.newPage();
 p.on('console',m=>{ if(m.type()==='error') console.log('console',p.url(),m.text().slice(0,300)); }); p.on('pageerror',e=>console.log('pageerror',p.url(),String(e).slice(0,300)));
 await p.goto(base+'/sign-in'); await p.waitForSelector('h1'); await p.screenshot({path:`/tmp/pw/shots/signin-${w}-${theme}.png`});
 await p.getByLabel('E-mail address').fill(`${who}@saltmere.example`); await p.getByLabel('Password').fill(pw); await p.getByRole('button',{name:'Sign in'}).click(); await p.waitForURL(base+'/');
 const api=async(u:string)=>(await p.request.get(base+u)).json();
 const arch=(await api('/api/campaigns/saltmere-basin/archives')).archives; const spring=arch.find((a:any)=>a.run==='spring').id; const neap=arch.find((a:any)=>a.run==='neap').id;
 const ds=await api('/api/campaigns/saltmere-basin/datasets/plume-temperature'); const d2=ds.drafts?.find((d:any)=>d.state==='submitted')?.id;
 const pages:Record<string,string>={desk:'/',campaigns:'/campaigns',campaign:'/campaigns/saltmere-basin',members:'/campaigns/saltmere-basin/members',settings:'/campaigns/saltmere-basin/settings',handin:'/campaigns/saltmere-basin/hand-in',archive:`/archives/${spring}`,neap:`/archives/${neap}`,record:`/archives/${spring}/record`,snapshots:`/archives/${neap}/snapshots?field=temperature&index=40`,reading:`/archives/${spring}/reading`,about:`/archives/${spring}/about`,datasets:'/datasets',dataset:'/campaigns/saltmere-basin/datasets/plume-temperature',...(d2?{draft:`/drafts/${d2}`,draftfindings:`/drafts/${d2}/findings`,draftmatrix:`/drafts/${d2}/matrix`,draftsources:`/drafts/${d2}/sources`}:{}),release:'/campaigns/saltmere-basin/datasets/plume-temperature/releases/1',review:'/review',audit:'/audit',tokens:'/tokens',admin:'/admin',inbox:'/demo-inbox'};
 for (const [n,u] of Object.entries(pages)) { if (only && !only.split(',').includes(n)) continue; await p.goto(base+u); await p.waitForLoadState('networkidle'); await p.waitForTimeout(250); await p.screenshot({path:`/tmp/pw/shots/${n}-${w}-${theme}.png`,fullPage:true});
  const over=await p.evaluate(()=>document.documentElement.scrollWidth-innerWidth); if(over>0) console.log(n,w,'overflows by',over);
  if (process.env.AXE) { const r=await new AxeBuilder({page:p}).withTags(['wcag2a','wcag2aa','wcag21a','wcag21aa','wcag22aa']).analyze(); for (const v of r.violations) console.log('AXE',n,theme,v.id,v.nodes.length,v.nodes[0]!.html.slice(0,160),v.nodes[0]!.failureSummary?.slice(0,200)); } }
 await c.close(); }
await b.close();

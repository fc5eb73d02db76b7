/** The e-mail as a table of 600 px with its styles written out. Compiled once, when the program starts. */
import Handlebars from 'handlebars'
import type { BulletinBlock } from './bulletinBlock.ts'
import { bulletinSource } from './bulletinTemplate.ts'
import { colours as c } from './colours.ts'

export interface Row {
  name: string
  text: string
}

export interface Page {
  subject: string
  head: string
  exercise: string | null
  ink: string
  wash: string
  priorityLine: string | null
  heading: string
  headline: string[]
  glyph: { cid: string; alt: string; height: string } | null
  waves: string | null
  measured: string | null
  chart: { cid: string; alt: string; caption: string } | null
  rows: Row[]
  bulletin: BulletinBlock | null
  others: { line: string; url: string }[]
  paragraphs: string[]
  receipt: { url: string; words: string } | null
  page: { url: string; words: string } | null
  afterwards: string[]
  caution: string | null
  foot: string[]
}

const source = `<!doctype html><html lang="en"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width"><title>{{subject}}</title></head>
<body style="margin:0;background:${c.paper};font-family:Inter,Arial,sans-serif;color:${c.ink}">
<table role="presentation" width="100%" cellpadding="0" cellspacing="0"><tr><td align="center" style="padding:24px 0">
<table role="presentation" width="600" cellpadding="0" cellspacing="0" style="width:100%;max-width:600px;background:${c.sheet};border:1px solid ${c.rule}">
<tr><td style="padding:16px 28px 12px;border-bottom:2px solid ${c.ink}"><table role="presentation" width="100%" cellpadding="0" cellspacing="0"><tr><td><img src="cid:mark@offing" width="86" height="22" alt="Offing" style="display:block;border:0"></td><td align="right" style="font-size:13px;color:${c.ink2}">{{head}}</td></tr></table></td></tr>
{{#if exercise}}<tr><td style="padding:12px 28px;background:${c.ink};color:#FFFFFF;font-size:16px;font-weight:600">{{exercise}}</td></tr>{{/if}}
<tr><td style="background:{{wash}};padding:18px 28px;border-left:8px solid {{ink}}">
{{#if priorityLine}}<div style="font-size:15px;font-weight:600;color:{{ink}}">{{priorityLine}}</div>{{/if}}
<h1 style="font-size:25px;line-height:1.2;font-weight:600;margin:6px 0 4px;letter-spacing:-.02em">{{heading}}</h1>
{{#each headline}}<div style="font-size:15px;line-height:1.45">{{this}}</div>{{/each}}</td></tr>
{{#if bulletin}}{{#with bulletin}}${bulletinSource}{{/with}}{{/if}}
{{#if waves}}<tr><td style="padding:20px 28px 4px"><table role="presentation" width="100%" cellpadding="0" cellspacing="0"><tr>
{{#if glyph}}<td width="150" valign="middle"><table role="presentation" cellpadding="0" cellspacing="0"><tr><td><img src="cid:{{glyph.cid}}" width="72" height="72" alt="{{glyph.alt}}" style="display:block;border:0"></td><td style="padding:0 16px 0 6px;font-size:26px;font-weight:600;color:${c.wave};white-space:nowrap">{{glyph.height}}</td></tr></table></td>{{/if}}
<td valign="middle" style="font-size:16px;line-height:1.55"><div>{{waves}}</div>{{#if measured}}<div style="color:${c.ink2};font-size:14px">{{measured}}</div>{{/if}}</td></tr></table></td></tr>
{{else}}{{#if measured}}<tr><td style="padding:20px 28px 4px;font-size:15px;color:${c.ink2}">{{measured}}</td></tr>{{/if}}{{/if}}
{{#if chart}}<tr><td style="padding:14px 28px 0"><img src="cid:{{chart.cid}}" width="544" height="96" alt="{{chart.alt}}" style="display:block;border:0;width:100%;max-width:544px;height:auto"><div style="font-size:13px;line-height:1.45;color:${c.ink2};padding-top:4px">{{chart.caption}}</div></td></tr>{{/if}}
{{#if rows}}<tr><td style="padding:14px 28px 0"><table width="100%" cellpadding="0" cellspacing="0" style="border-collapse:collapse;font-size:15px;line-height:1.35">
{{#each rows}}<tr><th scope="row" align="left" style="padding:9px 12px 9px 0;border-top:1px solid ${c.rule};color:${c.ink2};font-weight:400;white-space:nowrap;vertical-align:top">{{name}}</th><td style="padding:9px 0;border-top:1px solid ${c.rule};font-weight:600">{{text}}</td></tr>{{/each}}
</table></td></tr>{{/if}}
{{#if others}}<tr><td style="padding:14px 28px 0;font-size:15px;line-height:1.5"><ul style="margin:0;padding-left:20px">{{#each others}}<li><a href="{{url}}" style="color:${c.act}">{{line}}</a></li>{{/each}}</ul></td></tr>{{/if}}
{{#each paragraphs}}<tr><td style="padding:14px 28px 0;font-size:16px;line-height:1.5">{{this}}</td></tr>{{/each}}
{{#if receipt}}<tr><td style="padding:18px 28px 6px"><table role="presentation" cellpadding="0" cellspacing="0"><tr><td style="background:${c.act};border-radius:2px"><a href="{{receipt.url}}" style="display:inline-block;padding:15px 28px;color:#FFFFFF;font-size:16px;font-weight:600;text-decoration:none">{{receipt.words}}</a></td>{{#if page}}<td style="padding-left:18px"><a href="{{page.url}}" style="color:${c.act};font-size:15px">{{page.words}}</a></td>{{/if}}</tr></table></td></tr>
{{else}}{{#if page}}<tr><td style="padding:18px 28px 6px"><a href="{{page.url}}" style="color:${c.act};font-size:15px">{{page.words}}</a></td></tr>{{/if}}{{/if}}
{{#if afterwards}}<tr><td style="padding:10px 28px 18px;font-size:14px;line-height:1.5;color:${c.ink2}">{{#each afterwards}}{{this}} {{/each}}</td></tr>{{/if}}
<tr><td style="padding:14px 28px 18px;border-top:1px solid ${c.rule};font-size:14px;line-height:1.5;color:${c.ink2}">
{{#if caution}}<b style="font-weight:600;color:${c.ink}">{{caution}}</b><br>{{/if}}{{#each foot}}{{this}} {{/each}}</td></tr>
{{#if exercise}}<tr><td style="padding:12px 28px;background:${c.ink};color:#FFFFFF;font-size:16px;font-weight:600">{{exercise}}</td></tr>{{/if}}
</table></td></tr></table></body></html>`

/** Everything is escaped; a name that the page lacks is a fault and no empty place. */
export const renderPage = Handlebars.compile<Page>(source, { strict: true })

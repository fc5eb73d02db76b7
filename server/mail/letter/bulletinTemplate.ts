/** The part of the e-mail's table that only a bulletin has: when it was measured, at the weight of the figures, then the figures. */
import { colours as c } from './colours.ts'

const small = `font-size:14px;line-height:1.4;color:${c.ink2}`

export const bulletinSource = `<tr><td style="padding:18px 28px 0"><div style="border:2px solid ${c.ink};padding:8px 12px;font-size:17px;line-height:1.3;font-weight:600">{{measured}}</div></td></tr>
{{#if lead}}<tr><td style="padding:14px 28px 0"><table role="presentation" width="100%" cellpadding="0" cellspacing="0"><tr><td width="90" valign="middle"><img src="cid:{{lead.cid}}" width="72" height="72" alt="{{lead.alt}}" style="display:block;border:0"></td>
<td valign="middle"><div style="${small}">{{lead.name}}</div><div style="font-size:16px;line-height:1.3"><span style="color:${c.ink2}">from</span> <b style="font-size:34px;font-weight:600;white-space:nowrap">{{lead.from}}</b> <span style="color:${c.ink2}">toward</span> <b style="font-size:25px;font-weight:600;white-space:nowrap">{{lead.toward}}</b> <span style="white-space:nowrap">{{lead.towardSd}}</span></div></td></tr></table>
<table width="100%" cellpadding="0" cellspacing="0" style="margin-top:8px"><tr>{{#each lead.figures}}<td valign="top" style="padding-right:12px"><div style="${small}">{{name}}</div><b style="font-size:19px;font-weight:600;white-space:nowrap">{{value}}</b> <span style="font-size:14px;white-space:nowrap">{{sd}}</span></td>{{/each}}</tr></table></td></tr>{{/if}}
{{#each meaning}}<tr><td style="padding:14px 28px 0;font-size:16px;line-height:1.5">{{this}}</td></tr>{{/each}}
{{#if rows}}<tr><td style="padding:14px 28px 0"><table width="100%" cellpadding="0" cellspacing="0" style="border-collapse:collapse;font-size:15px;line-height:1.35">
{{#each rows}}<tr><td style="padding:8px 12px 8px 0;border-top:1px solid ${c.rule};vertical-align:top"><b style="font-weight:600">{{name}}</b><div style="${small}">{{words}}</div></td><td align="right" style="padding:8px 0;border-top:1px solid ${c.rule};vertical-align:top;white-space:nowrap"><b style="font-size:17px;font-weight:600">{{value}}</b><div style="${small}">{{sd}}</div></td></tr>{{/each}}
</table></td></tr>{{/if}}`

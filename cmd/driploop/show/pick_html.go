package show

import (
	"bytes"
	"html/template"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/unit"
)

// HTML writes the list as one page without script or anything from elsewhere: it
// prints on one sheet where the job is of the usual size, and reads on a phone.
func (p *Pick) HTML() ([]byte, error) {
	var b bytes.Buffer
	if err := pickPage.Execute(&b, pickView{p}); err != nil {
		return nil, err
	}
	return b.Bytes(), nil
}

// pickView is what the page's template asks for. Strings from files go through
// visible, so that marks which turn or hide text show as escapes on the page too.
type pickView struct{ *Pick }

func (v pickView) Title() string                           { return visible(v.Job + dash(v.Pick.Title)) }
func (v pickView) When() []string                          { return visibles(v.when()) }
func (v pickView) NotThere() []Item                        { return visibleItems(v.missing()) }
func (v pickView) ToolItems() []Item                       { return visibleItems(v.tools()) }
func (v pickView) LooseItems() []Item                      { return visibleItems(v.loose()) }
func (v pickView) Expected() []Item                        { return visibleItems(v.coming()) }
func (v pickView) GivenItems() []Item                      { return visibleItems(v.given()) }
func (v pickView) Length(l unit.MM) string                 { return v.length(l) }
func (v pickView) Show(s string) string                    { return visible(s) }
func (v pickView) Lay(l bom.Label) string                  { return v.lay(l) }
func (v pickView) End(s string) string                     { return visible(orNothing(s)) }
func (v pickView) Left(r bom.PickReel) string              { return v.left(r) }
func (v pickView) Known(r bom.PickReel) string             { return visible(v.known(r)) }
func (v pickView) What(p *catalog.Part, first bool) string { return visible(v.describe(p, first)) }

// BinsAt and ReelsAt are what is taken from one shelf.
func (v pickView) BinsAt(where string) []bom.PickBin {
	var out []bom.PickBin
	for _, b := range v.Bins {
		if b.Where == where {
			out = append(out, b)
		}
	}
	return out
}

func (v pickView) ReelsAt(where string) []bom.PickReel {
	var out []bom.PickReel
	for _, r := range v.Reels {
		if r.Where == where {
			out = append(out, r)
		}
	}
	return out
}

func visible(s string) string { return string(Clean(s)) }

func visibles(list []string) []string {
	out := make([]string, len(list))
	for i, s := range list {
		out[i] = visible(s)
	}
	return out
}

func visibleItems(list []Item) []Item {
	out := make([]Item, len(list))
	for i, it := range list {
		out[i] = Item{visible(it.Name), visible(it.Text)}
	}
	return out
}

var pickPage = template.Must(template.New("pick").Parse(`<!DOCTYPE html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
<meta name="color-scheme" content="light">
<title>Pick list for {{.Title}}</title>
<style>
body { font: 15px/1.35 sans-serif; margin: 1em auto; max-width: 46em; padding: 0 .8em; color: #111; background: #fff }
h1 { font-size: 1.25em; margin: 0 0 .2em }
h2 { font-size: 1em; margin: 1em 0 .2em; border-bottom: 1.5px solid #111 }
h3 { font-size: .95em; margin: .7em 0 .1em; font-weight: 600 }
p { margin: .2em 0 }
table { border-collapse: collapse; width: 100% }
th, td { text-align: left; padding: .25em .4em; border-bottom: 1px solid #bbb; vertical-align: top; overflow-wrap: anywhere }
th { font-weight: 600; font-size: .85em }
td:first-child { min-width: 6.5em; font-weight: 600 }
.n { text-align: right; white-space: nowrap }
.fill { width: 5em; border-bottom: 1.5px solid #111 }
.missing { border: 2px solid #111; padding: .3em .6em; margin: .6em 0 }
ul { margin: .2em 0; padding-left: 1.2em }
.labels { display: grid; grid-template-columns: repeat(auto-fill, minmax(15em, 1fr)); gap: .3em }
.label { border: 1px dashed #555; padding: .2em .4em; font-size: .85em; break-inside: avoid; overflow-wrap: anywhere }
tr, h2, h3, .reel { break-inside: avoid }
h2, h3 { break-after: avoid }
@media print {
  body { font-size: 9px; line-height: 1.25; margin: 0; max-width: none; padding: 0 }
  h2 { margin-top: .6em }
  h3 { margin-top: .4em }
  th, td { padding: .05em .3em }
  ul, .reels { columns: 2 }
  .labels { grid-template-columns: repeat(5, 1fr); gap: .2em }
}
@page { margin: 10mm }
</style>
</head>
<body>
<h1>Pick list for {{.Title}}</h1>
{{range .When}}<p>{{.}}</p>
{{end}}<p>Picked by <span class="fill">&emsp;&emsp;&emsp;&emsp;</span> on <span class="fill">&emsp;&emsp;&emsp;&emsp;</span></p>
{{with .NotThere}}<div class="missing"><strong>Not all there</strong>
<ul>{{range .}}<li><strong>{{.Name}}</strong> {{.Text}}</li>{{end}}</ul></div>
{{end}}{{with .ToolItems}}<h2>Tools</h2>
<ul>{{range .}}<li><strong>{{.Name}}</strong> {{.Text}}</li>{{end}}</ul>
{{end}}{{range $where := .Shelves}}<h2>From {{$.Show $where}}</h2>
{{with $.BinsAt $where}}<table>
<tr><th>part</th><th>what it is</th><th class="n">take</th><th>taken</th></tr>
{{range .}}<tr><td>{{$.Show .Part.ID}}</td><td>{{$.What .Part .CountFirst}}</td><td class="n">{{.Qty}}</td><td class="fill"></td></tr>
{{end}}</table>
{{end}}{{with $.ReelsAt $where}}<div class="reels">
{{range $r := .}}<div class="reel"><h3>Reel {{$.Show .Tag.ID}}, {{$.Show .Part.ID}}, {{$.Known $r}}</h3>
{{if .CountFirst}}<p>Measure it first: it is not put away.</p>
{{end}}<table>
<tr><th>line</th><th class="n">cut off</th><th class="n">to lay</th><th>cut</th></tr>
{{range .Cuts}}<tr><td>{{$.Show .Line}}</td><td class="n">{{$.Length .Length}}</td><td class="n">{{$.Length .Bare}}</td><td class="fill"></td></tr>
{{end}}</table>
<p>{{$.Left $r}}</p></div>
{{end}}</div>
{{end}}{{end}}{{with .LooseItems}}<h2>Also to bring, not booked</h2>
<ul>{{range .}}<li><strong>{{.Name}}</strong> {{.Text}}</li>{{end}}</ul>
{{end}}{{with .Expected}}<h2>On order for this job</h2>
<ul>{{range .}}<li><strong>{{.Name}}</strong> {{.Text}}</li>{{end}}</ul>
{{end}}{{with .GivenItems}}<h2>Given already</h2>
<ul>{{range .}}<li><strong>{{.Name}}</strong> {{.Text}}</li>{{end}}</ul>
{{end}}{{if .Labels}}<h2>Labels, one for each end</h2>
<div class="labels">
{{range $l := .Labels}}<div class="label"><strong>{{$.Show $.Job}} {{$.Show .Line}}</strong> at {{$.End .From}}, the other end at {{$.End .To}}; {{$.Show .Part}}{{$.Lay $l}}</div>
<div class="label"><strong>{{$.Show $.Job}} {{$.Show .Line}}</strong> at {{$.End .To}}, the other end at {{$.End .From}}; {{$.Show .Part}}{{$.Lay $l}}</div>
{{end}}</div>
{{end}}</body>
</html>
`))

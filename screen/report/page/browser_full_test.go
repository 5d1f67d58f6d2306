//go:build full

package page

import (
	"context"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"sync"
	"testing"
	"time"

	"github.com/chromedp/cdproto/cdp"
	"github.com/chromedp/cdproto/emulation"
	"github.com/chromedp/cdproto/log"
	"github.com/chromedp/cdproto/network"
	"github.com/chromedp/cdproto/runtime"
	"github.com/chromedp/chromedp"
)

// chromium is the browser that the tests drive.
func chromium(t *testing.T) string {
	t.Helper()
	for _, name := range []string{"chromium", "chromium-browser", "google-chrome"} {
		if path, err := exec.LookPath(name); err == nil {
			return path
		}
	}
	t.Fatal("no Chromium: install it (Debian: apt-get install chromium), or leave the tag full away")
	return ""
}

// A reader is a browser with a page open, and what it complained of.
type reader struct {
	*testing.T
	ctx        context.Context
	mutex      sync.Mutex
	complaints []string
	requests   []string
}

// open starts a browser, with or without WebGL, on a page of two ligands and a
// record that could not be read; the first has a hostile title.
func open(t *testing.T, flags ...chromedp.ExecAllocatorOption) *reader {
	t.Helper()
	flags = append(append(chromedp.DefaultExecAllocatorOptions[:], chromedp.ExecPath(chromium(t)), chromedp.NoSandbox,
		chromedp.WindowSize(1400, 900), chromedp.Flag("enable-unsafe-swiftshader", true)), flags...)
	alloc, stop := chromedp.NewExecAllocator(context.Background(), flags...)
	t.Cleanup(stop)
	ctx, stop := chromedp.NewContext(alloc)
	t.Cleanup(stop)
	r := &reader{T: t, ctx: ctx}
	r.must(chromedp.Listen(ctx, r.note))
	r.do(call(network.Enable, network.EnableParams{}), call(log.Enable, cdp.Empty{}))
	// Not on the first call: it would bound the life of the browser.
	r.ctx, stop = context.WithTimeout(ctx, 2*time.Minute)
	t.Cleanup(stop)
	return r
}

func call[P, R any](command cdp.Command[P, R], params P) chromedp.Action[chromedp.Void] {
	return chromedp.Func(func(ctx context.Context, t *chromedp.Target) error {
		_, err := cdp.Call(ctx, t, command, params)
		return err
	})
}

func (r *reader) note(event any) {
	r.mutex.Lock()
	defer r.mutex.Unlock()
	switch e := event.(type) {
	case *network.EventRequestWillBeSent:
		r.requests = append(r.requests, e.Request.URL)
	case *runtime.EventExceptionThrown:
		r.complaints = append(r.complaints, e.ExceptionDetails.Text)
	case *log.EventEntryAdded:
		if e.Entry.Level == log.EntryLevelError {
			r.complaints = append(r.complaints, e.Entry.Text)
		}
	}
}

func (r *reader) load() {
	r.Helper()
	var b Book
	b.Add(madeUp(r.T, "CCC[C@H](O)C1CCCCC1", hostile, 0, 6))
	second := madeUp(r.T, "O=C(NCc1ccc(F)cc1)c1ccnc(NC2CCOCC2)c1", "second", 1, 8)
	second.Warnings = nil
	b.Add(second)
	bad := madeUp(r.T, "C", "bad", 2, 2)
	bad.Kept, bad.Conformers, bad.Ensembles, bad.Status, bad.Reason = nil, nil, nil, "refused", hostile
	b.Add(bad)
	path := filepath.Join(r.TempDir(), "report.html")
	r.must(os.WriteFile(path, []byte(written(r.T, &b)), 0o644))
	r.do(chromedp.Navigate("file://" + path))
}

func (r *reader) must(err error) {
	r.Helper()
	if err != nil {
		r.Fatal(err)
	}
}

func (r *reader) do(steps ...chromedp.Action[chromedp.Void]) {
	r.Helper()
	r.must(chromedp.Do(r.ctx, steps...))
}

// number, text and truth ask the page.
func (r *reader) number(js string) float64 { r.Helper(); return ask[float64](r, js) }
func (r *reader) text(js string) string    { r.Helper(); return ask[string](r, js) }

func ask[T any](r *reader, js string) T {
	r.Helper()
	v, err := chromedp.Run(r.ctx, chromedp.Evaluate[T](js))
	if err != nil {
		r.Fatalf("%s: %v", js, err)
	}
	return v
}

// wait waits until the page says true.
func (r *reader) wait(js string) {
	r.Helper()
	if _, err := chromedp.Run(r.ctx, chromedp.Poll[bool](js, chromedp.WithPollingTimeout(20*time.Second))); err != nil {
		r.Fatalf("never came true: %s: %v", js, err)
	}
}

func (r *reader) expect(what string, js string, want any) {
	r.Helper()
	if have := ask[any](r, js); have != want {
		r.Errorf("%s: %v, want %v", what, have, want)
	}
}

// quiet checks that nothing was complained of and nothing was fetched.
func (r *reader) quiet() {
	r.Helper()
	r.mutex.Lock()
	defer r.mutex.Unlock()
	for _, c := range r.complaints {
		r.Errorf("the browser complains: %s", c)
	}
	for _, url := range r.requests {
		if !strings.HasPrefix(url, "file://") && !strings.HasPrefix(url, "data:") && !strings.HasPrefix(url, "blob:") {
			r.Errorf("a request left the page: %s", url)
		}
	}
	if len(r.requests) == 0 {
		r.Error("no request was seen, not even the page: the test is blind")
	}
}

// painted counts what is not transparent in the view of the molecule, read back
// right after it was drawn.
const painted = `(() => {
  const viewer = torsieveReport.current.viewer;
  viewer.render();
  const from = document.querySelector(".stage canvas");
  const to = document.createElement("canvas");
  to.width = from.width; to.height = from.height;
  const c = to.getContext("2d");
  c.drawImage(from, 0, 0);
  const p = c.getImageData(0, 0, to.width, to.height).data;
  let n = 0;
  for (let i = 3; i < p.length; i += 4) if (p[i] > 20) n++;
  return n;
})()`

func TestBrowserShowsTheEnsemble(t *testing.T) {
	r := open(t)
	r.load()
	r.wait(`Boolean(window.torsieveReport)`)
	r.expect("rows", `document.querySelectorAll("#ligands tbody tr").length`, 3.0)
	r.expect("structures", `document.querySelectorAll("#ligands svg.structure").length`, 3.0)

	r.do(chromedp.Click(chromedp.CSS(`#ligands a[href="#ligand-2"]`)))
	r.wait(`torsieveReport.current !== null && torsieveReport.current.n === 2`)
	r.expect("drawn by WebGL", `Boolean(torsieveReport.current.viewer)`, true)
	one := r.number(painted)
	if one < 3000 {
		t.Errorf("%g pixels of the molecule are painted", one)
	}

	// The row of a table, a level, a bar and a hand of a dial all choose.
	for k, js := range []string{
		`document.querySelectorAll("table.rows tbody button")[3].click()`,
		`document.querySelector(".levels [data-k='5']").dispatchEvent(new MouseEvent("click", {bubbles: true}))`,
		`document.querySelector(".populations [data-k='1']").dispatchEvent(new MouseEvent("click", {bubbles: true}))`,
		`document.querySelector(".dials [data-k='2']").dispatchEvent(new MouseEvent("click", {bubbles: true}))`,
	} {
		want := []float64{3, 5, 1, 2}[k]
		ask[any](r, "("+js+", 0)")
		r.expect("chosen", `torsieveReport.current.selected`, want)
		r.expect("chosen row", `[...document.querySelectorAll("table.rows tbody tr")].findIndex((tr) => tr.classList.contains("chosen"))`, want)
		r.expect("pressed", `document.querySelectorAll("table.rows [aria-pressed=true]").length`, 1.0)
		if words := r.text(`document.querySelector(".now").textContent`); !strings.Contains(words, []string{"rank 4", "rank 6", "rank 2", "rank 3"}[k]) {
			t.Errorf("the caption says %q", words)
		}
	}

	// Seen from one place, all shapes together paint more than one; none paint
	// nothing.
	one = r.number(painted)
	ask[any](r, `(() => {
	  const viewer = torsieveReport.current.viewer, view = viewer.getView(), s = document.querySelector("#overlay");
	  s.value = "all"; s.dispatchEvent(new Event("change"));
	  viewer.setView(view);
	  return 0;
	})()`)
	if all := r.number(painted); all < 1.05*one {
		t.Errorf("%g pixels with all shapes, %g with one", all, one)
	}
	ask[any](r, `(torsieveReport.current.viewer.removeAllModels(), 0)`)
	if none := r.number(painted); none != 0 {
		t.Errorf("%g pixels without a molecule", none)
	}
	r.quiet()
}

func TestBrowserTurnsByKeys(t *testing.T) {
	r := open(t)
	r.load()
	ask[any](r, `(location.hash = "#ligand-1", 0)`)
	r.wait(`Boolean(window.torsieveReport && torsieveReport.current)`)
	before := r.text(`JSON.stringify(torsieveReport.current.viewer.getView().slice(4))`)
	ask[any](r, `(document.querySelector(".stage").focus(), 0)`)
	r.do(chromedp.KeyEvent("\u0301")) // a key that means nothing
	ask[any](r, `(document.querySelector(".stage").dispatchEvent(new KeyboardEvent("keydown", {key: "ArrowLeft"})), 0)`)
	if after := r.text(`JSON.stringify(torsieveReport.current.viewer.getView().slice(4))`); after == before {
		t.Error("the arrow key turned nothing")
	}
	ask[any](r, `(document.querySelector(".stage").dispatchEvent(new KeyboardEvent("keydown", {key: "PageDown"})), 0)`)
	r.expect("chosen", `torsieveReport.current.selected`, 1.0)
	r.expect("the hostile title is told", `document.querySelector("#detail h2").textContent`, hostile)
	r.expect("and did not run", `window.broken === undefined`, true)
	r.quiet()
}

func TestBrowserSortsAndFilters(t *testing.T) {
	r := open(t)
	r.load()
	r.wait(`Boolean(window.torsieveReport)`)
	const first = `document.querySelector("#ligands tbody tr").dataset.n`
	r.do(chromedp.Click(chromedp.CSS(`#ligands th[data-sort=kept] button`)))
	r.expect("most conformers first", first, "2")
	r.expect("told", `document.querySelector("#ligands th[data-sort=kept]").getAttribute("aria-sort")`, "descending")
	r.do(chromedp.Click(chromedp.CSS(`#ligands th[data-sort=kept] button`)))
	r.expect("fewest first", first, "3")
	const shown = `document.querySelectorAll("#ligands tbody tr:not([hidden])").length`
	r.do(chromedp.SendKeys(chromedp.CSS(`#filter-text`), "SECOND"))
	r.expect("found", shown, 1.0)
	ask[any](r, `(() => { document.querySelector("#filter").reset(); document.querySelector("#filter-warned").click(); return 0; })()`)
	r.expect("with warnings", shown, 2.0)
	r.quiet()
}

func TestBrowserSavesFigures(t *testing.T) {
	r := open(t)
	r.load()
	ask[any](r, `(location.hash = "#ligand-2", 0)`)
	r.wait(`Boolean(window.torsieveReport && torsieveReport.current)`)
	figures := r.number(`document.querySelectorAll("#detail figure").length`)
	if figures < 8 {
		t.Fatalf("%g figures", figures)
	}
	r.expect("figures with both buttons", `[...document.querySelectorAll("#detail figure")].filter((f) => f.querySelectorAll("button.save").length === 2).length`, figures)
	for _, title := range []string{"Structure", "Shapes in space", "Energies, level by level", "Populations"} {
		for _, kind := range []string{"SVG", "PNG"} {
			ask[any](r, `(torsieveReport.saved = null, document.querySelector("button[aria-label='Save `+title+` as `+kind+`']").click(), 0)`)
			r.wait(`torsieveReport.saved !== null`)
			if size := r.number(`torsieveReport.saved.size`); size < 1500 {
				t.Errorf("%s as %s has %g bytes", title, kind, size)
			}
		}
	}
	r.quiet()
}

func TestBrowserWithoutWebGL(t *testing.T) {
	r := open(t, chromedp.Flag("disable-3d-apis", true))
	r.load()
	ask[any](r, `(location.hash = "#ligand-2", 0)`)
	r.wait(`Boolean(window.torsieveReport && torsieveReport.current)`)
	r.expect("no viewer", `torsieveReport.current.viewer === null`, true)
	if balls := r.number(`document.querySelectorAll(".stage svg .ball").length`); balls < 20 {
		t.Errorf("%g atoms are drawn", balls)
	}
	before := r.text(`document.querySelector(".stage").innerHTML`)
	ask[any](r, `(document.querySelector(".stage").dispatchEvent(new KeyboardEvent("keydown", {key: "ArrowUp"})), 0)`)
	if r.text(`document.querySelector(".stage").innerHTML`) == before {
		t.Error("the arrow key turned nothing")
	}
	r.quiet()
}

// Without scripts the overview and every ligand's tables are there.
func TestBrowserWithoutScripts(t *testing.T) {
	r := open(t)
	r.do(call(emulation.SetScriptExecutionDisabled, emulation.SetScriptExecutionDisabledParams{Value: true}))
	r.load()
	r.expect("no script ran", `window.torsieveReport === undefined`, true)
	r.expect("overview", `document.querySelectorAll("#ligands tbody tr").length`, 3.0)
	r.expect("ligands", `document.querySelectorAll("article.ligand").length`, 3.0)
	r.expect("conformers", `document.querySelectorAll("table.rows tbody tr").length`, 12.0)
	if words := r.text(`document.body.innerText`); !strings.Contains(words, "What to do next") || !strings.Contains(words, hostile) {
		t.Error("the tables of the ligands do not show")
	}
	r.expect("controls that need a script are away", `getComputedStyle(document.querySelector("#filter")).display`, "none")
	r.quiet()
}

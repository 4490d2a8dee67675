package browsertest

import (
	"encoding/json"
	"io"
	"net/http"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/chromedp/chromedp"
	"github.com/stretchr/testify/require"
)

const (
	done      = `document.querySelector('.stage .chip.done') !== null`
	tableRows = `[...document.querySelectorAll('table tbody tr')].map(r => [...r.children].map(c => c.innerText.trim()))`
)

// Butane in MMFF94: gauche 0.78 kcal/mol above anti (J. Comput. Chem. 17, 587 (1996), Table I), two gauche versions, hence 65 % and 35 %
// at 298.15 K.
func TestSearchFromSubmissionToDownload(t *testing.T) {
	s := open(t, 1280, 900)
	s.typeSMILES("CCCC")
	s.wait(`document.querySelector('form [role=status]')?.innerText.includes('14 atoms')`)
	s.submit()
	s.wait(done)
	s.wait(`document.querySelectorAll('table tbody tr').length === 2`)

	rows := read[[][]string](s, tableRows)
	require.Equal(t, "0.000", rows[0][1])
	require.Regexp(t, `^0\.7[6-9]|^0\.80`, rows[1][1])
	require.Regexp(t, `^6[45]\.\d %$`, rows[0][2])
	require.Regexp(t, `^3[45]\.\d %$`, rows[1][2])
	require.Equal(t, []string{"1", "2"}, []string{rows[0][3], rows[1][3]})

	s.wait(`document.querySelector('.viewer-host canvas') !== null`)
	s.do(chromedp.Click(chromedp.CSS("table tbody tr:nth-child(2) button")))
	s.wait(`document.querySelector('.view h2').innerText === 'Minimum 2'`)

	links := read[[]string](s, `[...document.querySelectorAll('.downloads a')].map(a => a.href)`)
	require.Len(t, links, 4)
	for _, link := range links {
		answer, err := http.Get(link)
		require.NoError(t, err)
		body, err := io.ReadAll(answer.Body)
		require.NoError(t, err)
		require.NoError(t, answer.Body.Close())
		require.Equal(t, http.StatusOK, answer.StatusCode, link)
		require.Contains(t, answer.Header.Get("Content-Disposition"), "attachment")
		switch {
		case strings.Contains(link, "format=sdf"):
			require.Equal(t, 2, strings.Count(string(body), "$$$$"))
		case strings.Contains(link, "format=json"):
			require.True(t, json.Valid(body))
		}
	}
}

func TestUnreadableSMILESShowsWhere(t *testing.T) {
	s := open(t, 1280, 900)
	s.typeSMILES("CC(C")
	s.wait(`document.querySelector('form [role=alert]') !== null`)
	text := read[string](s, `document.querySelector('form [role=alert]').innerText`)
	require.Contains(t, text, "column")
	require.Contains(t, text, "^")
	require.Equal(t, 0, read[int](s, `document.querySelectorAll('li').length`), "nothing was queued")
}

func TestOpenStereochemistryIsChosenByTheUser(t *testing.T) {
	s := open(t, 1280, 900)
	s.typeSMILES("CC(O)CC")
	s.wait(`document.querySelectorAll('form .choices button').length === 2`)
	s.submit()
	s.wait(`document.querySelectorAll('form [role=alert] .choices button').length === 2`)
	s.do(chromedp.Click(chromedp.CSS("form [role=alert] .choices button")))
	s.wait(`document.querySelector('form textarea').value.includes('@')`)
	s.submit()
	s.wait(`document.querySelector('.stage .chip') !== null`)
}

func TestSaltMustBeSplit(t *testing.T) {
	s := open(t, 1280, 900)
	s.typeSMILES("[Na+].CC(=O)[O-]")
	s.wait(`document.querySelectorAll('form .choices button').length === 2`)
}

func TestFileUpload(t *testing.T) {
	s := open(t, 1280, 900)
	path := filepath.Join(t.TempDir(), "water.xyz")
	require.NoError(t, os.WriteFile(path, []byte("3\nwater\nO 0 0 0\nH 0.96 0 0\nH -0.24 0.93 0\n"), 0o600))
	s.do(chromedp.SetUploadFiles(chromedp.CSS("input[type=file]"), []string{path}))
	s.wait(`document.querySelector('form [role=status]')?.innerText.includes('3 atoms')`)
	s.submit()
	s.wait(done)
	s.wait(`document.querySelectorAll('table tbody tr').length === 1`)
}

func TestRunningSearchCanBePausedResumedAndCancelled(t *testing.T) {
	s := open(t, 1280, 900)
	s.typeSMILES("C[C@@H]1CCCCCCCCCCCCC(=O)C1") // muscone: long enough to be caught
	s.submit()
	press := func(label string) {
		button := `[...document.querySelectorAll('.actions button')].find(b => b.innerText === '` + label + `')`
		s.wait(button + ` !== undefined`)
		read[bool](s, button+`.click() === undefined`)
	}
	s.wait(`document.querySelector('.stage .chip.running') !== null`)
	press("Pause")
	s.wait(`document.querySelector('.stage .chip.paused') !== null`)
	press("Resume")
	s.wait(`document.querySelector('.stage .chip.running') !== null`)
	press("Cancel")
	s.wait(`document.querySelector('.stage .chip.cancelled') !== null`)
	s.do(chromedp.Reload(), chromedp.WaitVisible(chromedp.CSS(".stage .chip.cancelled")))
}

func TestPhoneWidth(t *testing.T) {
	s := open(t, 390, 844)
	s.typeSMILES("CCCC")
	s.submit()
	s.wait(done)
	s.wait(`document.querySelectorAll('table tbody tr').length === 2`)
	require.LessOrEqual(t, read[int](s, `document.documentElement.scrollWidth`), 390, "no sideways scrolling")
}

// The rules of axe-core find nothing, before and after a search. The script is evaluated through the protocol, since the page's policy
// keeps foreign scripts out.
func TestAccessibility(t *testing.T) {
	source, err := os.ReadFile(filepath.Join("..", "node_modules", "axe-core", "axe.min.js"))
	if err != nil {
		missing(t, "the accessibility test needs the page's packages: run make page")
	}
	s := open(t, 1280, 900)
	audit := func() []string {
		read[bool](s, string(source)+";window.audit=undefined;axe.run().then(r=>{window.audit=r.violations.map(v=>v.id+': '+v.nodes.map(n=>n.html).join(' | '))});true")
		s.wait(`window.audit !== undefined`)
		return read[[]string](s, `window.audit`)
	}
	require.Empty(t, audit())
	s.typeSMILES("CCCC")
	s.submit()
	s.wait(done)
	s.wait(`document.querySelectorAll('table tbody tr').length === 2`)
	require.Empty(t, audit())
}

package page

import (
	"encoding/xml"
	"errors"
	"io"
	"strings"
	"testing"
	"unicode/utf8"
)

// Expected markup: MathML Core (W3C), written by hand.
func TestFormulas(t *testing.T) {
	for tex, want := range map[string]string{
		"x":                                "<mi>x</mi>",
		"12.5x_1":                          "<mrow><mn>12.5</mn><msub><mi>x</mi><mn>1</mn></msub></mrow>",
		"x_i^2":                            "<msubsup><mi>x</mi><mi>i</mi><mn>2</mn></msubsup>",
		"x^2_i":                            "<msubsup><mi>x</mi><mi>i</mi><mn>2</mn></msubsup>",
		"x^{2n}":                           "<msup><mi>x</mi><mrow><mn>2</mn><mi>n</mi></mrow></msup>",
		"x^12":                             "<msup><mi>x</mi><mn>12</mn></msup>",
		"{}_a":                             "<msub><mrow></mrow><mi>a</mi></msub>",
		"f''":                              "<msup><mi>f</mi><mo>′′</mo></msup>",
		"f'^2":                             "<msup><mi>f</mi><mrow><mo>′</mo><mn>2</mn></mrow></msup>",
		`c_i^\dagger`:                      "<msubsup><mi>c</mi><mi>i</mi><mo>†</mo></msubsup>",
		`\frac{a}{b+1}`:                    "<mfrac><mi>a</mi><mrow><mi>b</mi><mo>+</mo><mn>1</mn></mrow></mfrac>",
		`\frac12`:                          "", // one number of two digits is one argument
		`\sqrt{2}`:                         "<msqrt><mn>2</mn></msqrt>",
		`\sqrt[3]{x}`:                      "<mroot><mi>x</mi><mn>3</mn></mroot>",
		`\sum_{i=1}^N`:                     "<munderover><mo>∑</mo><mrow><mi>i</mi><mo>=</mo><mn>1</mn></mrow><mi>N</mi></munderover>",
		`\int_0^\infty`:                    "<msubsup><mo>∫</mo><mn>0</mn><mi>∞</mi></msubsup>",
		`a-b`:                              "<mrow><mi>a</mi><mo>−</mo><mi>b</mi></mrow>",
		`a<b`:                              "<mrow><mi>a</mi><mo>&lt;</mo><mi>b</mi></mrow>",
		`a\,b`:                             `<mrow><mi>a</mi><mspace width="0.1667em"></mspace><mi>b</mi></mrow>`,
		`|\psi\rangle`:                     `<mrow><mo stretchy="false" lspace="0" rspace="0">|</mo><mi>ψ</mi><mo stretchy="false">⟩</mo></mrow>`,
		`\hat H`:                           `<mover accent="true"><mi>H</mi><mo stretchy="false">^</mo></mover>`,
		`\overline{ab}`:                    `<mover accent="true"><mrow><mi>a</mi><mi>b</mi></mrow><mo stretchy="true">¯</mo></mover>`,
		`\mathrm{Tr}`:                      `<mi mathvariant="normal">Tr</mi>`,
		`\text{if  a<b}`:                   "<mtext>if\u00a0\u00a0a&lt;b</mtext>",
		`\mathbb{ZR}`:                      "<mi>ℤℝ</mi>",
		`\mathcal{HA}`:                     "<mi>ℋ𝒜</mi>",
		`\sin x`:                           `<mrow><mi>sin</mi><mspace width="0.1667em"></mspace><mi>x</mi></mrow>`,
		`\sin^2(x)`:                        `<mrow><msup><mi>sin</mi><mn>2</mn></msup><mo stretchy="false">(</mo><mi>x</mi><mo stretchy="false">)</mo></mrow>`,
		`\left(a\right.`:                   `<mrow><mo form="prefix" fence="true" stretchy="true">(</mo><mi>a</mi><mo form="postfix" fence="true" stretchy="true"></mo></mrow>`,
		`\left<a\middle|b\}`:               "",
		`\pm \times \ne \le`:               "<mrow><mo>±</mo><mo>×</mo><mo>≠</mo><mo>≤</mo></mrow>",
		`ħω ≈ 1⁄2`:                         "<mrow><mi>ħ</mi><mi>ω</mi><mo>≈</mo><mn>1</mn><mo>⁄</mo><mn>2</mn></mrow>",
		`\{1\}\%\$\&`:                      `<mrow><mo stretchy="false">{</mo><mn>1</mn><mo stretchy="false">}</mo><mo>%</mo><mo>$</mo><mo>&amp;</mo></mrow>`,
		`\binom{n}{k}`:                     `<mrow><mo>(</mo><mfrac linethickness="0"><mi>n</mi><mi>k</mi></mfrac><mo>)</mo></mrow>`,
		`\mathbf{k}`:                       `<mrow class="bold"><mi>k</mi></mrow>`,
		`\bra{a}\ket b`:                    `<mrow><mrow><mo stretchy="false">⟨</mo><mi>a</mi><mo stretchy="false" lspace="0" rspace="0">|</mo></mrow><mrow><mo stretchy="false" lspace="0" rspace="0">|</mo><mi>b</mi><mo stretchy="false">⟩</mo></mrow></mrow>`,
		`\lim_{x\to 0}`:                    `<munder><mo form="prefix" movablelimits="true" lspace="0" rspace="0.1667em">lim</mo><mrow><mi>x</mi><mo>→</mo><mn>0</mn></mrow></munder>`,
		`\begin{matrix}a&b\\c\end{matrix}`: "<mrow><mtable><mtr><mtd><mi>a</mi></mtd><mtd><mi>b</mi></mtd></mtr><mtr><mtd><mi>c</mi></mtd></mtr></mtable></mrow>",
	} {
		got, err := formula(tex, false)
		if want == "" {
			if err == nil {
				t.Errorf("%s: no error", tex)
			}
			continue
		}
		got = strings.TrimPrefix(got, `<math xmlns="http://www.w3.org/1998/Math/MathML"><semantics>`)
		got, rest, _ := strings.Cut(got, "<annotation")
		if err != nil || got != want || !strings.HasSuffix(rest, "</semantics></math>") {
			t.Errorf("%s:\n%s %v\nwant\n%s", tex, got, err, want)
		}
	}
	got, err := formula(` a<"b" `, true)
	want := `<math xmlns="http://www.w3.org/1998/Math/MathML" display="block"><semantics><mrow><mi>a</mi><mo>&lt;</mo><mo>&#34;</mo><mi>b</mi><mo>&#34;</mo></mrow><annotation encoding="application/x-tex">a&lt;&#34;b&#34;</annotation></semantics></math>`
	if err != nil || got != want {
		t.Errorf("%s %v", got, err)
	}
}

func TestErrorsOfFormulas(t *testing.T) {
	for tex, want := range map[string]string{
		`a+\unknown`:                      `character 3: unknown command \unknown; `,
		`\frac{a}`:                        `character 1: \frac wants something behind it`,
		`a^`:                              "character 2: ^ wants something behind it",
		`a^1^2`:                           "character 4: a second ^ at the same place",
		`a_1_2`:                           "character 4: a second _ at the same place",
		`{a`:                              "character 1: this brace is not closed before the end of the formula",
		`a}`:                              "character 2: } has no partner",
		`a & b`:                           "character 3: & has no partner",
		`a \\ b`:                          `character 3: \\ has no partner`,
		`\left( a`:                        `character 1: \left without its \right`,
		`\left( {a \right)}`:              `character 8: this brace is not closed before \right`,
		`a \right)`:                       `character 3: \right has no partner`,
		`\left a`:                         `character 1: \left wants a bracket`,
		`\sqrt[3`:                         "character 1: the bracket of the degree is not closed",
		`\begin{table}a\end{table}`:       `character 1: there is no \begin{table}`,
		`\begin{matrix}a\end{cases}`:      `character 16: \end{cases} does not fit`,
		`\begin{matrix}a`:                 `character 1: \begin{matrix} without its \end{matrix}`,
		`\text a{`:                        "brace",
		`\text{a$`:                        `character 8: \text takes plain words`,
		`\text`:                           "character 1: \\text wants its words in braces",
		`\text{a`:                         "character 1: the brace of \\text is not closed",
		`\mathbb{a}`:                      "has the capital letters A to Z",
		`\mathrm{ }`:                      "holds nothing",
		`50%`:                             `character 3: % has a meaning of its own`,
		"a\u0301":                         "character 2: the character '\u0301' is not available",
		"\\text{\u200b}":                  "is not available",
		`\`:                               "character 1: a backslash with nothing behind it",
		"a\xff":                           "not UTF-8",
		strings.Repeat("{", 10000):        "more than 60 groups",
		strings.Repeat(`\hat`, 10000):     "more than 60 groups",
		strings.Repeat(`\sqrt[`, 10000):   "more than 60 groups",
		strings.Repeat(`a^`, 10000) + "b": "a second ^",
	} {
		_, err := formula(tex, false)
		if !errors.Is(err, ErrFormula) || !strings.Contains(err.Error(), want) {
			t.Errorf("%.40s: error %.200v\nwant %s", tex, err, want)
		}
	}
}

// FuzzFormula: a formula is either refused with an error that names a place in it
// or becomes well-formed markup that carries it as it was written.
func FuzzFormula(f *testing.F) {
	for _, seed := range []string{"E_k = \\sqrt{d_x^2+d_y^2}", `\left( a \middle| b \right]`, `\begin{cases} a & b \\ c \end{cases}`, `|\psi⟩^\dagger'`, `\text{x<y}~\mathbb{R}`, "\\", "{{}", "\x00"} {
		f.Add(seed)
	}
	f.Fuzz(func(t *testing.T, tex string) {
		out, err := formula(tex, true)
		if err != nil {
			if !errors.Is(err, ErrFormula) || out != "" {
				t.Fatalf("%q: %q, %v", tex, out, err)
			}
			return
		}
		d := xml.NewDecoder(strings.NewReader(out))
		within, source := false, ""
		for {
			token, err := d.Token()
			if errors.Is(err, io.EOF) {
				break
			}
			if err != nil {
				t.Fatalf("%q: %v in %s", tex, err, out)
			}
			switch token := token.(type) {
			case xml.StartElement:
				within = token.Name.Local == "annotation"
				for _, a := range token.Attr {
					if strings.HasPrefix(a.Name.Local, "on") || a.Name.Local == "href" || a.Name.Local == "style" {
						t.Fatalf("%q: attribute %s", tex, a.Name.Local)
					}
				}
			case xml.EndElement:
				within = false
			case xml.CharData:
				if within {
					source += string(token)
				}
			}
		}
		if want := strings.ReplaceAll(strings.ReplaceAll(strings.TrimSpace(tex), "\r\n", "\n"), "\r", "\n"); source != want || !utf8.ValidString(out) {
			t.Fatalf("%q: annotation %q", tex, source)
		}
	})
}

package script

import (
	"regexp"
	"strings"
)

// commands are those of most formulas of a calculation. A formula of these alone
// holds none that the typesetter does not know: it need not be started to say so.
const commands = `\alpha \beta \gamma \delta \epsilon \varepsilon \zeta \eta \theta \kappa \lambda \mu \nu \xi \pi \rho \sigma \tau \phi \varphi \chi \psi \omega
\Gamma \Delta \Theta \Lambda \Xi \Pi \Sigma \Phi \Psi \Omega
\cdot \times \pm \mp \div \le \ge \leq \geq \ne \neq \approx \equiv \sim \propto \to \infty \partial \ldots \cdots \dots \circ \prime \degree
\sin \cos \tan \ln \log \exp \max \min \sum \prod \int \lim
\left \right \quad \qquad \, \; \: \! \% \& \# \_ \$ \{ \} \|`

var (
	common  = map[string]bool{}
	command = regexp.MustCompile(`\\(?:[A-Za-z]+|(?s:.))`)
)

func init() {
	for _, c := range strings.Fields(commands) {
		common[c] = true
	}
	common[`\ `] = true
}

// wraps are the commands with arguments in braces, and how many they take.
var wraps = map[string]int{`\frac`: 2, `\dfrac`: 2, `\tfrac`: 2, `\sqrt`: 1, `\text`: 1, `\mathrm`: 1, `\mathbf`: 1, `\mathit`: 1, `\dot`: 1, `\ddot`: 1, `\hat`: 1, `\bar`: 1, `\vec`: 1, `\tilde`: 1, `\overline`: 1}

// Common tells whether all commands of a formula are common ones, and no mark in it
// has a meaning in an environment alone.
func Common(src string) bool {
	if strings.ContainsAny(command.ReplaceAllLiteralString(src, ""), "&#~") {
		return false
	}
	for _, c := range command.FindAllString(src, -1) {
		if !common[c] && wraps[c] == 0 {
			return false
		}
	}
	return true
}

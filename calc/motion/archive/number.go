package archive

import (
	"math"
	"strconv"
	"strings"
)

// number reads one number as Fortran and spreadsheets write them: blanks around,
// a leading +, no digit before or after the point, exponents E e D d Q q. It
// refuses what else the Go parser would take: NaN, Inf, hexadecimal, 1_000.
//
// place is the value of the last printed digit: 0.01 for 3.14 and 10 for 31e1.
func number(field string) (value, place float64, ok bool) {
	s := strings.Trim(field, " \t")
	digits, decimals, point, exponent := 0, 0, false, -1
	for i := 0; i < len(s); i++ {
		switch c := s[i]; {
		case c >= '0' && c <= '9':
			if exponent < 0 {
				digits++
				if point {
					decimals++
				}
			}
		case c == '.':
			if point || exponent >= 0 {
				return 0, 0, false
			}
			point = true
		case c == '+' || c == '-':
			if i != 0 && i != exponent+1 {
				return 0, 0, false
			}
		case strings.IndexByte("eEdDqQ", c) >= 0:
			if exponent >= 0 || digits == 0 {
				return 0, 0, false
			}
			exponent = i
		default:
			return 0, 0, false
		}
	}
	if digits == 0 {
		return 0, 0, false
	}
	power := 0
	if exponent >= 0 {
		p, err := strconv.Atoi(s[exponent+1:])
		if err != nil || p < -400 || p > 400 {
			return 0, 0, false
		}
		power = p
		if s[exponent] != 'e' && s[exponent] != 'E' {
			s = s[:exponent] + "e" + s[exponent+1:]
		}
	}
	value, err := strconv.ParseFloat(s, 64)
	if err != nil || math.IsInf(value, 0) {
		return 0, 0, false
	}
	return value, math.Pow10(power - decimals), true
}

// tokens splits a line at blanks, tabs and commas, and before a sign that follows a
// digit or a point: "-0.12E-03-0.23E-03" are two numbers. yield gets each
// token with its byte offset and says whether to go on.
func tokens(line string, yield func(offset int, token string) bool) {
	start := -1
	for i := 0; i <= len(line); i++ {
		blank := i == len(line) || strings.IndexByte(" \t,", line[i]) >= 0
		touching := !blank && i > 0 && start >= 0 && (line[i] == '-' || line[i] == '+') && (line[i-1] >= '0' && line[i-1] <= '9' || line[i-1] == '.')
		if (blank || touching) && start >= 0 {
			if !yield(start, line[start:i]) {
				return
			}
			start = -1
		}
		if !blank && start < 0 {
			start = i
		}
	}
}

// column is the place of a byte offset in a line, in characters from 1.
func column(line string, offset int) int { return len([]rune(line[:min(offset, len(line))])) + 1 }

// unreadable words why a token is no number.
func unreadable(token string) (summary, hint string) {
	token = strings.Trim(token, " \t")
	switch {
	case token == "":
		return "a value is missing", "a sample cannot be left out nor set to zero"
	case strings.Trim(token, "*") == "":
		return "a value did not fit its field when the file was written (" + token + ")", "it is missing; take the record from its source"
	case gap(token) && token != "":
		return strconv.Quote(token) + " is not a number", "a sample that is not known cannot be left out nor set to zero; repair the record at its source"
	case thousands(token):
		return strconv.Quote(token) + " holds a separator of thousands", "write numbers without it"
	case numberLike(token):
		return strconv.Quote(token) + " has a decimal comma", "a decimal comma wants ; or tabs between the columns and no decimal point anywhere"
	}
	r := []rune(token)
	return strconv.Quote(string(r[:min(len(r), 40)])) + " is not a number", "two files joined, or notes among the numbers?"
}

// gap tells what programs write for a number that they do not know.
func gap(field string) bool {
	switch strings.ToLower(strings.TrimLeft(strings.TrimSpace(field), "+-")) {
	case "", "nan", "inf", "infinity", "na", "n/a", "#n/a", "null", "none", "nil", "1.#qnan", "1.#inf":
		return true
	}
	return strings.Trim(field, "*") == ""
}

// numberLike tells digits with a comma, which a column of words does not hold.
func numberLike(field string) bool {
	return strings.ContainsAny(field, "0123456789") && strings.Trim(field, "+-0123456789.,") == "" && strings.Contains(field, ",")
}

// thousands tells 1,234.5 from other texts.
func thousands(s string) bool {
	s, _, point := strings.Cut(strings.TrimLeft(s, "+-"), ".")
	groups := strings.Split(s, ",")
	for i, g := range groups {
		if strings.Trim(g, "0123456789") != "" || i > 0 && len(g) != 3 || len(g) == 0 || len(g) > 3 {
			return false
		}
	}
	return len(groups) > 2 || len(groups) == 2 && point
}

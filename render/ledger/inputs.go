package ledger

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"fmt"
	"io/fs"
	"maps"
	"slices"
	"strings"

	"quoin/calc/exhibit"
)

// BuildFile is where a package says how it was built.
const BuildFile = "inputs/build.json"

// BuildFacts is inputs/build.json: with the other inputs, all that is needed to
// build the package again.
type BuildFacts struct {
	Schema       int                `json:"schema"`
	Main         string             `json:"main"`
	Overrides    []exhibit.Override `json:"overrides"`
	Commit       string             `json:"commit"`
	CommitDate   string             `json:"commit_date"`
	Dirty        bool               `json:"dirty"`
	Tool         string             `json:"tool"`
	Architecture string             `json:"architecture"` // of the processor; on another, last digits may differ
}

// text is build.json as it is written.
func (f BuildFacts) text() ([]byte, error) {
	text, err := json.MarshalIndent(f, "", "  ")
	if err != nil {
		return nil, fmt.Errorf("ledger: %w", err)
	}
	return append(text, '\n'), nil
}

// ReadBuild reads inputs/build.json. Where the program of this version wrote it, it
// must be as it is written.
func ReadBuild(text []byte, tool string) (f BuildFacts, err error) {
	if err := json.Unmarshal(text, &f); err != nil {
		return f, fmt.Errorf("%s cannot be read: %w", BuildFile, err)
	}
	again, err := f.text()
	if err != nil || f.Schema != Schema || f.Tool == tool && !bytes.Equal(again, text) {
		return f, fmt.Errorf("%s is not as %s writes it", BuildFile, tool)
	}
	return f, nil
}

// Inputs is the inputs/ folder: files, by slash path relative to the root, and
// inputs/build.json. It fails on a path that leads out of the root, on one that
// not every machine can hold, and on an input that would take the place of another
// or of build.json.
func Inputs(files map[string][]byte, p *exhibit.Package) (map[string][]byte, error) {
	out := make(map[string][]byte, len(files)+1)
	folded := map[string]string{}
	for _, path := range slices.Sorted(maps.Keys(files)) {
		if !fs.ValidPath(path) || path == "." {
			return nil, fmt.Errorf("ledger: input path %q is not inside the root", path)
		}
		if why := unportable(path); why != "" {
			return nil, fmt.Errorf("the package cannot keep the file %s: %s; rename it", path, why)
		}
		if other, ok := folded[strings.ToLower(path)]; ok {
			return nil, fmt.Errorf("the package cannot keep both %s and %s: they differ in case only and are one file on many machines; rename one", other, path)
		}
		folded[strings.ToLower(path)] = path
		out["inputs/"+path] = files[path]
	}
	if _, ok := folded["build.json"]; ok {
		return nil, fmt.Errorf("an input may not be called build.json at the root: the package keeps its own %s", BuildFile)
	}
	from := p.Provenance
	text, err := BuildFacts{
		Schema: Schema, Main: from.Source, Overrides: append([]exhibit.Override{}, from.Overrides...),
		Commit: from.Commit, CommitDate: from.CommitDate, Dirty: from.Dirty, Tool: from.Tool, Architecture: from.Build.Architecture,
	}.text()
	if err != nil {
		return nil, err
	}
	out[BuildFile] = text
	return out, nil
}

// unportable says why a path cannot be a file on every system that a package is
// opened on; "" where it can.
func unportable(path string) string {
	for part := range strings.SplitSeq(path, "/") {
		switch stem, _, _ := strings.Cut(part, "."); {
		case strings.ContainsFunc(part, func(r rune) bool { return r < ' ' || strings.ContainsRune(`<>:"|?*\`, r) }):
			return fmt.Sprintf("not every system has names with %q", strings.Trim(strings.Map(func(r rune) rune {
				if r < ' ' || strings.ContainsRune(`<>:"|?*\`, r) {
					return r
				}
				return -1
			}, part), ""))
		case strings.HasSuffix(part, ".") || strings.HasSuffix(part, " "):
			return "not every system has names that end in a full stop or a blank"
		case exhibit.Device(strings.TrimSpace(stem)):
			return "some systems keep the name " + stem + " for themselves"
		}
	}
	return ""
}

// Digest names a package by what it was built from: the SHA-256, in hexadecimal,
// of one line for each file of inputs, in byte order of the paths,
//
//	<SHA-256 of the file in hexadecimal><two blanks><path>\n
//
// and a last line "tool <tool>\n". In the folder of a package that is
//
//	( find inputs -type f | LC_ALL=C sort | xargs -d '\n' sha256sum; echo "tool quoin 0.1.0" ) | sha256sum
func Digest(inputs map[string][]byte, tool string) string {
	h := sha256.New()
	for _, path := range slices.Sorted(maps.Keys(inputs)) {
		fmt.Fprintf(h, "%s  %s\n", hash(inputs[path]), path)
	}
	fmt.Fprintf(h, "tool %s\n", tool)
	return hex.EncodeToString(h.Sum(nil))
}

// Sum is the SHA-256 of a file in hexadecimal, as it stands in manifests.
func Sum(b []byte) string { return hash(b) }

func hash(b []byte) string {
	sum := sha256.Sum256(b)
	return hex.EncodeToString(sum[:])
}

// ManifestFile is what makes a folder a package of ours.
const ManifestFile = "manifest.json"

// manifestFormat stands in every manifest, so that no other program's
// manifest.json is taken for ours.
const manifestFormat = "quoin package"

// ManifestFacts is manifest.json.
type ManifestFacts struct {
	Format string          `json:"format"` // "quoin package"
	Schema int             `json:"schema"`
	Tool   string          `json:"tool"`
	Digest string          `json:"digest"` // see Digest
	Files  []ManifestEntry `json:"files"`  // every other file, sorted by path
}

// ManifestEntry is one file of a package.
type ManifestEntry struct {
	Path   string `json:"path"`
	SHA256 string `json:"sha256"`
	Bytes  int    `json:"bytes"`
}

// Manifest is manifest.json for all, the other files of the package by path.
func Manifest(all map[string][]byte, digest, tool string) []byte {
	m := ManifestFacts{Format: manifestFormat, Schema: Schema, Tool: tool, Digest: digest}
	for _, path := range slices.Sorted(maps.Keys(all)) {
		if path != ManifestFile {
			m.Files = append(m.Files, ManifestEntry{path, hash(all[path]), len(all[path])})
		}
	}
	return m.text()
}

// text is manifest.json as it is written.
func (m ManifestFacts) text() []byte {
	list, err := lines(m.Files)
	if err != nil {
		panic(err.Error())
	}
	var o object
	o.member("format", must(m.Format))
	o.member("schema", must(m.Schema))
	o.member("tool", must(m.Tool))
	o.member("digest", must(m.Digest))
	o.member("files", list)
	return o.bytes()
}

// ReadManifest reads manifest.json; an error says that it is not one of ours.
func ReadManifest(text []byte) (ManifestFacts, error) {
	var m ManifestFacts
	d := json.NewDecoder(bytes.NewReader(text))
	if err := d.Decode(&m); err != nil {
		return m, fmt.Errorf("%s cannot be read: %w", ManifestFile, err)
	}
	if m.Format != manifestFormat {
		return m, fmt.Errorf("%s is not that of a package", ManifestFile)
	}
	return m, nil
}

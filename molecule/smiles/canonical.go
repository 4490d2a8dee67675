package smiles

import (
	"crypto/sha256"
	"encoding/base32"
	"strings"

	"tarn/molecule"
)

// Canonical returns the canonical isomeric SMILES: the same text for every numbering, Kekulé structure and customary
// drawing variant of one stereoisomer, and different texts for different ones. Hydrogens are implied where OpenSMILES
// allows it, aromatic rings written in lower case.
func Canonical(m *molecule.Molecule) string { return Write(m.Canonical()) }

// keyLength is the length of a key in characters of five bits: among a billion molecules two share a key with a
// probability below 10⁻¹².
const keyLength = 20

// Key returns the key by which Tarn knows the molecule: the first 100 bits of the SHA-256 digest of the canonical SMILES
// in lower-case base 32 (RFC 4648), safe in URLs and file names.
func Key(m *molecule.Molecule) string {
	digest := sha256.Sum256([]byte(Canonical(m)))
	return strings.ToLower(base32.StdEncoding.EncodeToString(digest[:])[:keyLength])
}

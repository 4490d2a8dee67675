package typing

import (
	"strings"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/forcefield/internal/parameters"
	"tarn/forcefield/internal/sketch"
)

// TestSymbols draws one small molecule for each environment in Table III of T. A. Halgren, J. Comput. Chem. 17, 490 (1996),
// and names the symbols of its heavy atoms and, after the bar, of hydrogens that are not on carbon.
func TestSymbols(t *testing.T) {
	tables, err := parameters.Load(false)
	require.NoError(t, err)
	for _, c := range []struct{ name, atoms, bonds, symbols string }{
		{"ethanol", "CH3 CH2 OH", "1-2 2-3", "CR CR OR | HOR"},
		{"cyclopropane", "CH2 CH2 CH2", "1-2 2-3 3-1", "CR3R CR3R CR3R"},
		{"cyclobutene", "CH2 CH2 CH CH", "1-2 2-3 3=4 4-1", "CR4R CR4R CE4R CE4R"},
		{"cyclopropene", "CH2 CH CH", "1-2 2=3 3-1", "CR3R C=C C=C"},
		{"acetone", "CH3 C O CH3", "1-2 2=3 2-4", "CR C=OR O=CR CR"},
		{"acetic acid", "CH3 C O OH", "1-2 2=3 2-4", "CR COO O=CO OC=O | HOCO"},
		{"acetate", "CH3 C O O-", "1-2 2=3 2-4", "CR CO2M O2CM O2CM"},
		{"dithioacetate", "CH3 C S S-", "1-2 2=3 2-4", "CR CS2M S2CM S2CM"},
		{"monothioacetate", "CH3 C O S-", "1-2 2=3 2-4", "CR C=OS O=C SM"},
		{"acetamide", "CH3 C O NH2", "1-2 2=3 2-4", "CR C=ON O=CN NC=O | HNCO HNCO"},
		{"urea", "NH2 C O NH2", "1-2 2=3 2-4", "NC=O CONN O=CN NC=O | HNCO HNCO HNCO HNCO"},
		{"carbamic acid", "NH2 C O OH", "1-2 2=3 2-4", "NC=O COON O=CN OC=O | HNCO HNCO HOCO"},
		{"carbonic acid", "OH C O OH", "1-2 2=3 2-4", "OC=O COOO O=CO OC=O | HOCO HOCO"},
		{"thioacid", "CH3 C O SH", "1-2 2=3 2-4", "CR C=OS O=C S | HS"},
		{"thioacetamide", "CH3 C S NH2", "1-2 2=3 2-4", "CR C=SN S=C NC=S | HNCS HNCS"},
		{"dithioacid", "CH3 C S SH", "1-2 2=3 2-4", "CR CSS S=C S | HS"},
		{"thioaldehyde", "CH3 CH S", "1-2 2=3", "CR C=S S=C"},
		{"sulfine", "CH2 S O", "1=2 2=3", "CS=O =S=O O=S="},
		{"sulfene", "CH2 S O O", "1=2 2=3 2=4", "CSO2 =SO2 O2S O2S"},
		{"imine", "CH3 CH NH", "1-2 2=3", "CR C=N N=C | HN=C"},
		{"formamidine", "NH2 CH NH", "1-2 2=3", "NC=N C=N N=C | HNCN HNCN HN=C"},
		{"guanidine", "NH2 C NH NH2", "1-2 2=3 2-4", "NC=N CGD N=C NC=N | HNCN HNCN HN=C HNCN HNCN"},
		{"iminium", "CH2 NH2+", "1=2", "C=N N+=C | HNC+ HNC+"},
		{"formamidinium", "NH2 CH NH2+", "1-2 2=3", "NCN+ CNN+ NCN+ | HNN+ HNN+ HNN+ HNN+"},
		{"guanidinium", "NH2 C NH2+ NH2", "1-2 2=3 2-4", "NGD+ CGD+ NGD+ NGD+ | HGD+ HGD+ HGD+ HGD+ HGD+ HGD+"},
		{"phosphaethene", "CH2 PH", "1=2", "C=P -P=C | HP"},
		{"vinyl alcohol", "CH2 CH OH", "1=2 2-3", "C=C C=C OC=C | HOCC"},
		{"imidic acid", "CH3 C NH OH", "1-2 2=3 2-4", "CR C=N N=C OC=N | HN=C HOCN"},
		{"vinylamine", "CH2 CH NH2", "1=2 2-3", "C=C C=C NC=C | HNCC HNCC"},
		{"ethynylamine", "CH C NH2", "1#2 2-3", "CSP CSP NC%C | HNC% HNC%"},
		{"cyanamide", "N C NH2", "1#2 2-3", "NSP CSP NC%N | HNC% HNC%"},
		{"allene", "CH2 C CH2", "1=2 2=3", "C=C =C= C=C"},
		{"isonitrile", "CH3 N+ C-", "1-2 2#3", "CR NR% C%"},
		{"methylamine", "CH3 NH2", "1-2", "CR NR | HNR HNR"},
		{"methylammonium", "CH3 NH3+", "1-2", "CR NR+ | HNR+ HNR+ HNR+"},
		{"amine oxide", "CH3 NH2+ O-", "1-2 2-3", "CR N3OX OXN | HNOX HNOX"},
		{"nitrone", "CH2 NH+ O-", "1=2 2-3", "C=N N2OX OXN | HNOX"},
		{"diazene cation", "NH2+ NH", "1=2", "N+=N N=N | HNN+ HNN+ HN=C"},
		{"diazene", "CH3 N N CH3", "1-2 2=3 3-4", "CR N=N N=N CR"},
		{"triazene", "NH2 N NH", "1-2 2=3", "NN=N N=N N=N | HNNN HNNN HN=C"},
		{"hydrazone", "NH2 N CH2", "1-2 2=3", "NN=C N=C C=N | HNNC HNNC"},
		{"nitroso", "CH3 N O", "1-2 2=3", "CR N=O O=N"},
		{"methyl nitrite", "CH3 O N O", "1-2 2-3 3=4", "CR ON=O N=O O=N"},
		{"methyl nitrate", "CH3 O N+ O O-", "1-2 2-3 3=4 3-5", "CR ONO2 NO3 O2NO O2NO"},
		{"nitrate", "N+ O O- O-", "1=2 1-3 1-4", "NO3 O3N O3N O3N"},
		{"azide", "CH3 N N+ N-", "1-2 2=3 3=4", "CR N=N =N= NAZT"},
		{"diazonium", "CH3 N+ N", "1-2 2#3", "CR NR% NSP"},
		{"dimethylamide ion", "CH3 N- CH3", "1-2 2-3", "CR NM CR"},
		{"methoxide", "CH3 O-", "1-2", "CR OM"},
		{"hydroxide", "OH-", "", "OM | HOM"},
		{"enolate", "CH2 CH O-", "1=2 2-3", "C=C C=C OM2"},
		{"hydroxamate", "CH3 C O NH O-", "1-2 2=3 2-4 4-5", "CR C=ON O=CN NC=O OM | HNCO"},
		{"water and oxonium", "OH2 OH3+", "", "OH2 O+ | HOH HOH HO+ HO+ HO+"},
		{"protonated ketone", "CH3 C OH+ CH3", "1-2 2=3 2-4", "CR C=OR O=+ CR | HO=+"},
		{"methanethiol", "CH3 SH", "1-2", "CR S | HS"},
		{"sulfenic acid", "CH3 S OH", "1-2 2-3", "CR S -OS | HOS"},
		{"sulfinic acid", "CH3 S O OH", "1-2 2=3 2-4", "CR S=O O=S OS=O | HOS"},
		{"sulfonic acid", "CH3 S O O OH", "1-2 2=3 2=4 2-5", "CR SO3 O2S O2S OSO2 | HOS"},
		{"sulfuric acid", "S O O OH OH", "1=2 1=3 1-4 1-5", "SO4 O2S O2S OSO3 OSO3 | HOS HOS"},
		{"sulfate", "S O O O- O-", "1=2 1=3 1-4 1-5", "SO4 O4S O4S O4S O4S"},
		{"sulfonamide", "CH3 S O O NH2", "1-2 2=3 2=4 2-5", "CR SO2N O2S O2S NSO2 | HNSO HNSO"},
		{"sulfamic acid", "OH S O O NH2", "1-2 2=3 2=4 2-5", "OSO2 SO3 O2S O2S NSO3 | HOS HNSO HNSO"},
		{"sulfinate", "CH3 S O O-", "1-2 2=3 2-4", "CR SO2M O2S O2S"},
		{"thiosulfinate", "CH3 S O S-", "1-2 2=3 2-4", "CR SSOM OSMS SSMO"},
		{"sulfoximide", "CH3 S O NH CH3", "1-2 2=3 2=4 2-5", "CR SNO O-S NSO CR | HNSO"},
		{"phosphoric acid", "P O OH OH OH", "1=2 1-3 1-4 1-5", "PO4 OP OPO3 OPO3 OPO3 | HOP HOP HOP"},
		{"phosphonic acid", "PH O OH OH", "1=2 1-3 1-4", "PO3 OP OPO2 OPO2 | HP HOP HOP"},
		{"phosphinic acid", "PH2 O OH", "1=2 1-3", "PO2 OP OPO | HP HP HOP"},
		{"phosphine oxide", "PH3 O", "1=2", "PO OP | HP HP HP"},
		{"phosphine sulfide", "PH3 S", "1=2", "PTET S-P | HP HP HP"},
		{"phosphoramidate", "NH2 P O O- O-", "1-2 2=3 2-4 2-5", "NPO3 PO3 O3P O3P O3P | HNPO HNPO"},
		{"phosphine", "PH3", "", "P | HP HP HP"},
		{"silane", "SiH3 F", "1-2", "SI F | HSI HSI HSI"},
		{"furan", "O CH CH CH CH", "1-2 2=3 3-4 4=5 5-1", "OFUR C5A C5B C5B C5A"},
		{"thiazole", "S CH N CH CH", "1-2 2=3 3-4 4=5 5-1", "STHI C5A N5B C5B C5A"},
		{"pyrazole", "NH N CH CH CH", "1-2 2=3 3-4 4=5 5-1", "NPYL N5A C5B C5B C5A | HPYL"},
		{"imidazolium", "NH+ CH NH CH CH", "1=2 2-3 3-4 4=5 5-1", "NIM+ CIM+ NIM+ C5 C5 | HIM+ HIM+"},
		{"pyrrolide", "N- CH CH CH CH", "1-2 2=3 3-4 4=5 5-1", "N5M C5 C5 C5 C5"},
		{"2-aminothiazolium", "S C NH+ CH CH NH2", "1-2 2=3 3-4 4=5 5-1 2-6", "STHI CIM+ NIM+ C5B C5A NCN+ | HIM+ HNN+ HNN+"},
		{"2-aminoimidazolium", "NH C NH+ CH CH NH2", "1-2 2=3 3-4 4=5 5-1 2-6", "NIM+ CIM+ NIM+ C5 C5 NGD+ | HIM+ HIM+ HGD+ HGD+"},
		{"1,2-dimethylpyrazolium", "N N+ CH CH CH CH3 CH3", "1-2 2=3 3-4 4=5 5-1 1-6 2-7", "NPYL N5A+ C5B C5B C5A CR CR"},
		{"isoxazole oxide", "O N+ CH CH CH O-", "1-2 2=3 3-4 4=5 5-1 2-6", "OFUR N5AX C5B C5B C5A OXN"},
		{"indole", "NH CH CH C CH CH CH CH C", "1-2 2=3 3-4 4-5 5=6 6-7 7=8 8-9 9-1 4=9", "NPYL C5A C5B C5B CB CB CB CB C5A | HPYL"},
		{"indolizine", "N CH CH CH C CH CH CH CH", "1-2 2=3 3-4 4=5 5-1 5-6 6=7 7-8 8=9 9-1", "NPYL C5A C5B C5B C5A C=C C=C C=C C=C"},
		{"purine", "N CH N C C CH N CH NH", "1=2 2-3 3=4 4-5 5=6 6-1 5-7 7=8 8-9 9-4", "NPYD CB NPYD C5A C5B CB N5B C5A NPYL | HPYL"},
		{"pyrrolo[3,2-b]pyrrole", "NH CH CH C NH CH CH C", "1-2 2=3 3-4 4=8 8-1 4-5 5-6 6=7 7-8", "NPYL C5A C5B C5 NPYL C5A C5B C5 | HPYL HPYL"},
		{"pyridine", "N CH CH CH CH CH", "1=2 2-3 3=4 4-5 5=6 6-1", "NPYD CB CB CB CB CB"},
		{"pyridinium", "NH+ CH CH CH CH CH", "1=2 2-3 3=4 4-5 5=6 6-1", "NPD+ CB CB CB CB CB | HPD+"},
		{"pyridine oxide", "N+ CH CH CH CH CH O-", "1=2 2-3 3=4 4-5 5=6 6-1 1-7", "NPOX CB CB CB CB CB OXN"},
		{"2-pyridone", "NH C CH CH CH CH O", "1-2 2-3 3=4 4-5 5=6 6-1 2=7", "NC=O C=ON C=C C=C C=C C=C O=CN | HNCO"},
		{"cyclooctatetraene", "CH CH CH CH CH CH CH CH", "1=2 2-3 3=4 4-5 5=6 6-7 7=8 8-1", "C=C C=C C=C C=C C=C C=C C=C C=C"},
		{
			"ions", "F- Cl- Br- Li+ Na+ K+ Zn+2 Ca+2 Cu+ Cu+2 Mg+2 Fe+2 Fe+3", "",
			"F- CL- BR- LI+ NA+ K+ ZN+2 CA+2 CU+1 CU+2 MG+2 FE+2 FE+3",
		},
	} {
		t.Run(c.name, func(t *testing.T) {
			m := sketch.Molecule(t, c.atoms, c.bonds)
			a, err := Assign(m, tables)
			require.NoError(t, err)
			var heavy, hydrogens []string
			for i, s := range a.Symbols {
				switch {
				case m.Atoms[i].Element != 1:
					heavy = append(heavy, s)
				case m.Atoms[m.Neighbors(i)[0].Atom].Element != 6:
					hydrogens = append(hydrogens, s)
				default:
					require.Equal(t, "HC", s)
				}
			}
			got := strings.Join(heavy, " ")
			if len(hydrogens) > 0 {
				got += " | " + strings.Join(hydrogens, " ")
			}
			require.Equal(t, c.symbols, got)
		})
	}
}

// TestSharedCharges compares the charge of groups with J. Comput. Chem. 17, 616 (1996): shared equally by equivalent atoms.
func TestSharedCharges(t *testing.T) {
	tables, err := parameters.Load(false)
	require.NoError(t, err)
	for _, c := range []struct {
		name, atoms, bonds string
		charges            []float64 // of the first atoms
	}{
		{"acetate", "O O- C CH3", "1=3 2-3 3-4", []float64{-0.5, -0.5, 0, 0}},
		{"sulfonate", "O O O- S CH3", "1=4 2=4 3-4 4-5", []float64{-1. / 3, -1. / 3, -1. / 3, 0, 0}},
		{"phosphate diester", "O O- P O CH3 O CH3", "1=3 2-3 3-4 4-5 3-6 6-7", []float64{-0.5, -0.5, 0, 0, 0, 0}},
		{"phosphate monoester", "O O- O- P O CH3", "1=4 2-4 3-4 4-5 5-6", []float64{-2. / 3, -2. / 3, -2. / 3, 0, 0}},
		{"monothiophosphate diester", "S O- P O CH3 O CH3", "1=3 2-3 3-4 4-5 3-6 6-7", []float64{-0.5, -0.5, 0, 0, 0, 0}},
		{"sulfate", "O O O- O- S", "1=5 2=5 3-5 4-5", []float64{-0.5, -0.5, -0.5, -0.5, 0}},
		{"perchlorate", "O O O O- Cl", "1=5 2=5 3=5 4-5", []float64{-0.25, -0.25, -0.25, -0.25, 0}},
		{"nitromethane", "O O- N+ CH3", "1=3 2-3 3-4", []float64{0, 0, 0, 0}},
		{"dimethyl sulfone", "O O S CH3 CH3", "1=3 2=3 3-4 3-5", []float64{0, 0, 0, 0, 0}},
		{"formamidinium", "NH2 NH2+ CH", "1-3 2=3", []float64{0.5, 0.5, 0}},
		{"guanidinium", "NH2 NH2+ NH2 C", "1-4 2=4 3-4", []float64{1. / 3, 1. / 3, 1. / 3, 0}},
		{"tetrazolide", "N- N N N CH", "1-2 2=3 3-4 4=5 5-1", []float64{-0.25, -0.25, -0.25, -0.25, 0}},
		{
			"two guanidinium units on one N", "NH C NH2 NH2+ C NH2 NH2+", "1-2 2-3 2=4 1-5 5-6 5=7",
			[]float64{2. / 3, 0, 1. / 3, 1. / 3, 0, 1. / 3, 1. / 3},
		},
	} {
		a, err := Assign(sketch.Molecule(t, c.atoms, c.bonds), tables)
		require.NoError(t, err, c.name)
		require.InDeltaSlice(t, c.charges, a.FormalCharges[:len(c.charges)], 1e-12, c.name)
	}
}

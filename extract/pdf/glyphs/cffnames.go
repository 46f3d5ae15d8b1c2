package glyphs

import (
	"strings"
	"sync"
)

// cffStandardCount is how many strings every compact font program knows
// without listing them.
const cffStandardCount = 391

// The standard strings 1 to 149 are the glyphs of StandardEncoding in the
// order of their codes; these are 150 to 346 (Adobe Technical Note 5176,
// appendix A). The rest are accented small capitals and names of weights,
// which carry no number.
const cffMoreStrings = `onesuperior logicalnot mu trademark Eth onehalf plusminus Thorn onequarter divide
brokenbar degree thorn threequarters twosuperior registered minus eth multiply threesuperior
copyright Aacute Acircumflex Adieresis Agrave Aring Atilde Ccedilla Eacute Ecircumflex
Edieresis Egrave Iacute Icircumflex Idieresis Igrave Ntilde Oacute Ocircumflex Odieresis
Ograve Otilde Scaron Uacute Ucircumflex Udieresis Ugrave Yacute Ydieresis Zcaron
aacute acircumflex adieresis agrave aring atilde ccedilla eacute ecircumflex edieresis
egrave iacute icircumflex idieresis igrave ntilde oacute ocircumflex odieresis ograve
otilde scaron uacute ucircumflex udieresis ugrave yacute ydieresis zcaron
exclamsmall Hungarumlautsmall dollaroldstyle dollarsuperior ampersandsmall Acutesmall
parenleftsuperior parenrightsuperior twodotenleader onedotenleader zerooldstyle oneoldstyle
twooldstyle threeoldstyle fouroldstyle fiveoldstyle sixoldstyle sevenoldstyle eightoldstyle
nineoldstyle commasuperior threequartersemdash periodsuperior questionsmall asuperior bsuperior
centsuperior dsuperior esuperior isuperior lsuperior msuperior nsuperior osuperior rsuperior
ssuperior tsuperior ff ffi ffl parenleftinferior parenrightinferior Circumflexsmall
hyphensuperior Gravesmall Asmall Bsmall Csmall Dsmall Esmall Fsmall Gsmall Hsmall Ismall Jsmall
Ksmall Lsmall Msmall Nsmall Osmall Psmall Qsmall Rsmall Ssmall Tsmall Usmall Vsmall Wsmall
Xsmall Ysmall Zsmall colonmonetary onefitted rupiah Tildesmall exclamdownsmall centoldstyle
Lslashsmall Scaronsmall Zcaronsmall Dieresissmall Brevesmall Caronsmall Dotaccentsmall
Macronsmall figuredash hypheninferior Ogoneksmall Ringsmall Cedillasmall questiondownsmall
oneeighth threeeighths fiveeighths seveneighths onethird twothirds zerosuperior foursuperior
fivesuperior sixsuperior sevensuperior eightsuperior ninesuperior zeroinferior oneinferior
twoinferior threeinferior fourinferior fiveinferior sixinferior seveninferior eightinferior
nineinferior centinferior dollarinferior periodinferior commainferior`

var cffStrings = sync.OnceValue(func() []string {
	all := []string{".notdef"}
	for _, n := range standardNames() {
		if n != "" {
			all = append(all, n)
		}
	}
	return append(all, strings.Fields(cffMoreStrings)...)
})

func cffStandardName(sid int) string {
	if all := cffStrings(); sid >= 0 && sid < len(all) {
		return all[sid]
	}
	return ""
}

package mos

import (
	"strings"
	"sync"
)

// bsim3Fixed and bsim3Binned are the parameters of BSIM3v3.2 (M99/18 appendix A),
// without and with L, W and P forms; the last lines are junction and layout names
// that vendor cards add.
const (
	bsim3Fixed = selectors + ` mobmod capmod noimod nqsmod paramchk binunit version stimod acnqsmod
 tox toxm tnom lint ll lln lw lwn lwl wint wl wln ww wwn wwl xl xw xpart
 cgso cgdo cgbo cgsl cgdl ckappa cf clc cle dlc dwc vfbcv llc lwc lwlc wlc wwc wwlc
 rsh js jsw nj xti ijth cj mj pb cjsw mjsw pbsw cjswg mjswg pbswg tcj tcjsw tcjswg tpb tpbsw tpbswg
 noia noib noic em af ef kf gdsnoi tlev tlevc
 vtho vt0 uo rd rs rdc rsc acm hdif ldif calcacm sfvtflag is n cta ctp pta ptp trd trs lmlt wmlt dl dw
 ld wd xlref xwref nds vnds nlev capop cjgate php ptc lmin lmax wmin wmax acde moin noff voffcv`
	bsim3Binned = `cdsc cdscb cdscd cit nfactor xj vsat at a0 ags a1 a2 keta nsub nch ngate gamma1 gamma2
 vbx vbm xt vth0 k1 k1 k2 kt1 kt1l kt2 k3 k3b w0 nlx dvt0 dvt1 dvt2 dvt0w dvt1w dvt2w drout dsub
 ua ua1 ub ub1 uc uc1 u0 ute voff delta rdsw prwg prwb prt eta0 etab pclm pdiblc1 pdiblc2 pdiblcb
 pscbe1 pscbe2 pvag wr dwg dwb b0 b1 alpha0 alpha1 beta0 vfb elm cgsl cgdl ckappa cf clc cle
 vfbcv acde moin noff voffcv`
)

// bsim4Fixed and bsim4Binned are those of BSIM4 (BSIM4 Users' Manual, appendix A).
const (
	bsim4Fixed = selectors + ` mobmod rdsmod igcmod igbmod igbsmod capmod geomod rgeomod diomod rbodymod
 rgatemod permod acnqsmod trnqsmod fnoimod tnoimod tempmod mtrlmod mtrlcompatmod cvchargemod wpemod gidlmod
 paramchk binunit version tnoiaversion
 epsrox toxe toxp toxm dtox toxref eot vddeot tempeot leffeot weffeot ados bdos easub ni0sub bg0sub
 tbgasub tbgbsub phig epsrgate epsrsub tnom lp lint wint ll lln lw lwn lwl wl wln ww wwn wwl
 llc lwc lwlc wlc wwc wwlc dwj dlc dwc dlcig dlcigd xl xw lmin lmax wmin wmax
 voffl pditsl lambda vtl lc xn xpart rsh rshg rdswmin rdwmin rswmin xrcrg1 xrcrg2 ngcon xgw xgl
 dmcg dmci dmdg dmcgt xtis xtid xtss xtsd xtssws xtsswd xtsswgs xtsswgd
 jss jsd jsws jswd jswgs jswgd njs njd ijthsfwd ijthsrev ijthdfwd ijthdrev bvs bvd xjbvs xjbvd
 jtss jtsd jtssws jtsswd jtsswgs jtsswgd njts njtsd njtssw njtsswd njtsswg njtsswgd
 vtss vtsd vtssws vtsswd vtsswgs vtsswgd tnjts tnjtsd tnjtssw tnjtsswd tnjtsswg tnjtsswgd jtweff
 cjs cjd mjs mjd pbs pbd cjsws cjswd mjsws mjswd pbsws pbswd cjswgs cjswgd mjswgs mjswgd pbswgs pbswgd
 cj mj pb cjsw mjsw pbsw cjswg mjswg pbswg js jsw jswg nj tcj tcjsw tcjswg tpb tpbsw tpbswg xti
 cgso cgdo cgbo rbpb rbpd rbps rbdb rbsb gbmin rbps0 rbpsl rbpsw rbpsnf rbpd0 rbpdl rbpdw rbpdnf
 rbpbx0 rbpbxl rbpbxw rbpbxnf rbpby0 rbpbyl rbpbyw rbpbynf rbsbx0 rbsby0 rbdbx0 rbdby0
 rbsdbxl rbsdbxw rbsdbxnf rbsdbyl rbsdbyw rbsdbynf noia noib noic em af ef kf ntnoi lintnoi
 tnoia tnoib tnoic rnoia rnoib rnoic saref sbref wlod ku0 kvsat tku0 lku0 wku0 pku0 llodku0 wlodku0
 kvth0 lkvth0 wkvth0 pkvth0 llodvth wlodvth stk2 lodk2 steta0 lodeta0 web wec scref
 vtho uo rd rs dtoxcv vfbsdoff ijth sa sb sd ntox poxedge pigcd stimod rgeo geo delvto`
	bsim4Binned = `ndep nsd nsub ngate gamma1 gamma2 vbx vbm xt xj phin vfb vth0 k1 k2 k3 k3b kt1 kt1l kt2 w0
 lpe0 lpeb dvt0 dvt1 dvt2 dvt0w dvt1w dvt2w dvtp0 dvtp1 dvtp2 dvtp3 dvtp4 dvtp5 drout dsub
 ua ua1 ub ub1 uc uc1 ud ud1 up u0 eu ucs ute ucste voff tvoff tnfactor teta0 tvoffcv minv minvcv
 delta rdsw rdw rsw prwg prwb prt eta0 etab pclm pdiblc1 pdiblc2 pdiblcb fprout pdits pditsd
 pscbe1 pscbe2 pvag wr dwg dwb b0 b1 alpha0 alpha1 beta0 agidl bgidl cgidl egidl rgidl kgidl fgidl
 agisl bgisl cgisl egisl rgisl kgisl fgisl aigc bigc cigc aigsd bigsd cigsd aigs bigs cigs aigd bigd cigd
 aigbacc bigbacc cigbacc nigbacc aigbinv bigbinv cigbinv eigbinv nigbinv nigc ntox poxedge pigcd
 xrcrg1 xrcrg2 cdsc cdscb cdscd cit nfactor vsat at a0 ags a1 a2 keta kvth0we k2we ku0we
 cgsl cgdl ckappas ckappad cf clc cle vfbcv acde moin noff voffcv voffcvl vfbsdoff tvfbsdoff
 lambda vtl xn eigbinv lp`
)

// binnable makes a vocabulary of fixed and binned names: every binned name is
// known by itself and with l, w or p before it.
func binnable(fixed, binned string) func() vocabulary {
	return sync.OnceValue(func() vocabulary {
		var all strings.Builder
		all.WriteString(fixed + " " + binned)
		for _, n := range strings.Fields(binned) {
			all.WriteString(" l" + n + " w" + n + " p" + n)
		}
		return words(all.String())()
	})
}

var (
	bsim3Names = binnable(bsim3Fixed, bsim3Binned)
	bsim4Names = binnable(bsim4Fixed, bsim4Binned)
)

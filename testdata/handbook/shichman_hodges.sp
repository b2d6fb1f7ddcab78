The small-Vds law and its error
* Shichman & Hodges, IEEE JSSC SC-3 (1968): for the square law the chord resistance over 1/(k Vov)
* is 1/(1 - Vds/(2 Vov)) exactly. k = 1 mA/V2, Vov = 1 V: 1000 ohm at Vds -> 0, 1052.63 at 0.1 V, 1333.3 at 0.5 V.
.model n1 nmos level=1 kp=1m vto=0.5
M_0 0 g 0 0 n1 W=1u L=1u
M_a a g 0 0 n1 W=1u L=1u
M_b b g 0 0 n1 W=1u L=1u
*@ bias v(g)=1.5 v(a)=0.1 v(b)=0.5
*@ expect m_0 deep triode ron=999.9..1000.1
*@ expect m_a deep triode ron=1052.5..1052.8
*@ expect m_b triode ron=1333.2..1333.5
.end

Square law, three bias points
* Neamen, Microelectronics: Circuit Analysis and Design, exercise 3.1 (title from memory):
* k = 0.4 mA/V2, VT = 1 V. Stated results 0.200, 0.600 and 0.800 mA, checked to 0.5 %.
.model n1 nmos level=1 kp=0.4m vto=1
M_a da ga 0 0 n1 W=1u L=1u
M_b db gb 0 0 n1 W=1u L=1u
M_c da gb 0 0 n1 W=1u L=1u
*@ bias v(ga)=2 v(gb)=3 v(da)=4.5 v(db)=1
*@ expect m_a saturation id=0.199m..0.201m vdsat=0.995..1.005
*@ expect m_b triode id=0.597m..0.603m
*@ expect m_c saturation id=0.796m..0.804m vdsat=1.99..2.01
.end

Channel-length modulation
* Rabaey, Digital Integrated Circuits, example 3.7 (title from memory): k' = 19.6 uA/V2, W/L = 2,
* VT = 0.74 V, lambda = 0.06, VGS = VDS = 5 V carry 462 uA; 0.5 %.
.model n1 nmos level=1 kp=19.6u vto=0.74 lambda=0.06
M_a d g 0 0 n1 W=2u L=1u
*@ bias v(d)=5 v(g)=5
*@ expect m_a saturation id=459.7u..464.3u
.end

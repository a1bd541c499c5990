# The table of a plate of 100 mm at 77 GHz. At broadside 4 pi A^2/lambda^2 = 19.1855 dBsm (published: W. B. Gordon, IEEE Trans. AP 23, 1975).
roadglint shape plate --width 100mm --height 100mm --out plate.obj 2>/dev/null
roadglint sweep plate.obj --freq 77GHz --az -5:5:2.5

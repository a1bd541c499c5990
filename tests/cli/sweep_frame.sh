# Unit and axes: the head says what was used, and a plate in millimetres that lies face up is the plate of metres that faces forward.
printf 'o plate\nv -50 -50 0\nv 50 -50 0\nv 50 50 0\nv -50 50 0\nf 1 2 3 4\n' >lying.obj
roadglint sweep lying.obj --units mm --front z --up y --freq 77GHz --az 0

"""Writes four large real systems as Matrix Market files:

    assemble.py FOLDER

They are the examples of SfePy (Debian's python3-sfepy, 2021.4), on the meshes
that come with it, in its own assembly; entries of exactly zero are left out,
but for the 259 of pipe.

    pipe    the last Newton step of its flow through a bent pipe
            (navier_stokes/navier_stokes.py), 29339 unknowns
    creep   the same pipe without convection, velocities of second order,
            30188 unknowns
    rod     its pulled elastic cylinder (linear_elasticity/linear_elastic.py),
            the mesh refined twice, 46352 unknowns
    porous  its fluid in an elastic solid (multi_physics/biot.py), the mesh
            refined once, 34839 unknowns
"""
import os
import sys

import scipy.io
import sfepy
from sfepy.base.base import output
from sfepy.base.conf import ProblemConf, get_standard_keywords
from sfepy.discrete import Problem

output.set_output(quiet=True)
EXAMPLES = os.path.join(os.path.dirname(sfepy.__file__), "examples")
CREEP = """
from sfepy.examples.navier_stokes.navier_stokes import *
field_1 = dict(field_1, approx_order=2)
integral_1 = {"name": "i1", "order": 3}
equations = {
    "balance": "dw_div_grad.i1.Omega(fluid.viscosity, v, u) - dw_stokes.i1.Omega(v, p) = 0",
    "incompressibility": "- dw_stokes.i1.Omega(u, q) = 0",
}
"""


def write(folder, name, path, refine=0, solve=False, zeros=False):
    sys.path.insert(0, os.path.dirname(path))
    conf = ProblemConf.from_file(path, *get_standard_keywords())
    conf.options.refinement_level = refine
    problem = Problem.from_conf(conf)
    problem.time_update()
    problem.update_materials()
    state = problem.get_initial_state()
    state.apply_ebc()
    if solve:
        state = problem.solve(save_results=False, verbose=False)
    a = problem.get_evaluator().eval_tangent_matrix(state.get_reduced(), is_full=False)
    if not zeros:
        a.eliminate_zeros()
    to = os.path.join(folder, name + ".mtx")
    scipy.io.mmwrite(to, a, precision=17, symmetry="general")
    print(to, a.shape[0], a.nnz)


folder = sys.argv[1]
os.makedirs(folder, exist_ok=True)
own = os.path.join(folder, "creep_problem.py")
with open(own, "w") as f:
    f.write(CREEP)
write(folder, "creep", own)
os.remove(own)
write(folder, "rod", os.path.join(EXAMPLES, "linear_elasticity/linear_elastic.py"), refine=2)
write(folder, "porous", os.path.join(EXAMPLES, "multi_physics/biot.py"), refine=1)
write(folder, "pipe", os.path.join(EXAMPLES, "navier_stokes/navier_stokes.py"), solve=True, zeros=True)

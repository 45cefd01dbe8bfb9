"""DOLFIN with MUMPS through PETSc as a peer of assembly and of the whole nonlinear solve.

Speaks as the peers in C++ do, see peer.hpp. The problem: quadratic triangles, straight; -div(nu grad A) = J, A = 0 all
round; nu = 1/mu0 in air and rest + rise B^8 in steel, so that H = rest B + rise B^9 in closed form.
"""

import os
import sys
import time

os.environ.setdefault("DIJITSO_CACHE_DIR", os.path.join(os.path.dirname(os.path.abspath(__file__)), "out", "forms"))

import numpy as np
from dolfin import *
from petsc4py import PETSc

parameters["form_compiler"]["optimize"] = True
parameters["form_compiler"]["cpp_optimize"] = True
parameters["form_compiler"]["cpp_optimize_flags"] = "-O3 -march=native"
parameters["reorder_dofs_serial"] = True
set_log_level(LogLevel.ERROR)

NU0 = 1 / (4e-7 * np.pi)
AIR, STEEL = 0, 1
ORDERINGS = {"amd": 0, "scotch": 3, "pord": 4, "metis": 5}


class Problem:
    """Mesh, forms and their compiled code; matrices and factors are made by those who are timed."""

    def __init__(self, path, degree):
        with open(path, "rb") as file:
            corners, triangles = np.fromfile(file, np.int32, 2)
            xy = np.fromfile(file, np.float64, 2 * corners).reshape(-1, 2)
            cells = np.fromfile(file, np.int32, 3 * triangles).reshape(-1, 3)
            kind = np.fromfile(file, np.int32, triangles)
            density = np.fromfile(file, np.float64, triangles)
            rest, rise = np.fromfile(file, np.float64, 2)
        mesh = Mesh()
        editor = MeshEditor()
        editor.open(mesh, "triangle", 2, 2)
        editor.init_vertices(corners)
        editor.init_cells(triangles)
        for i, point in enumerate(xy):
            editor.add_vertex(i, point)
        for i, cell in enumerate(cells):
            editor.add_cell(i, np.sort(cell).astype(np.uintp))
        editor.close(False)
        self.triangles = triangles
        self.space = FunctionSpace(mesh, "P", 2)
        self.field = Function(self.space)
        current = Function(FunctionSpace(mesh, "DG", 0))
        current.vector().set_local(density)
        markers = MeshFunction("size_t", mesh, 2)
        markers.set_values(kind.astype(np.uintp))

        # The law's integrals with the given degree, the rest exactly.
        inside = Measure("dx", mesh, subdomain_data=markers)
        steel = inside(STEEL, metadata={"quadrature_degree": degree})
        air = inside(AIR, metadata={"quadrature_degree": 2})
        fine = inside(STEEL, metadata={"quadrature_degree": 5})
        u, v, w = self.field, TestFunction(self.space), TrialFunction(self.space)
        b2 = dot(grad(u), grad(u))
        rest, rise = Constant(rest), Constant(rise)
        gradient = (rest + rise * b2**4) * dot(grad(u), grad(v)) * steel
        gradient += Constant(NU0) * dot(grad(u), grad(v)) * air
        gradient -= current * v * air + current * v * steel
        self.energy = (rest * b2 / 2 + rise * b2**5 / 10) * fine + Constant(NU0) * b2 / 2 * air
        self.fixed = DirichletBC(self.space, Constant(0.0), "on_boundary")
        self.assembler = SystemAssembler(derivative(gradient, u, w), gradient, [self.fixed])
        self.unknowns = self.space.dim() - len(self.fixed.get_boundary_values())

    def set_bump(self, height):
        """A = height sin(pi x) sin(pi y) at the nodes."""
        x = self.space.tabulate_dof_coordinates()
        self.field.vector().set_local(height * np.sin(np.pi * x[:, 0]) * np.sin(np.pi * x[:, 1]))


class Assembled:
    def __init__(self, problem):
        self.problem, self.matrix, self.right = problem, PETScMatrix(), PETScVector()

    def assemble(self):
        self.problem.assembler.assemble(self.matrix, self.right)

    def check(self):
        product = self.matrix * self.problem.field.vector()
        return {"residual": self.right.norm("l2"), "quadratic": self.problem.field.vector().inner(product)}


def newton(problem, ordering, tolerance):
    """Newton's method from zero; a full step is shortened where the energy's slope has turned more than half round."""
    u = problem.field.vector()
    u.zero()
    system = Assembled(problem)
    system.assemble()
    matrix, right = system.matrix.mat(), system.right
    matrix.setOption(PETSc.Mat.Option.SPD, True)
    solver = PETSc.KSP().create()
    solver.setOperators(matrix)
    solver.setType("preonly")
    method = solver.getPC()
    method.setType("cholesky")
    method.setFactorSolverType("mumps")
    method.setFactorSetUpSolverType()
    method.getFactorMatrix().setMumpsIcntl(7, ORDERINGS[ordering])
    method.getFactorMatrix().setMumpsIcntl(8, 0)
    step = PETScVector(as_backend_type(u).vec().duplicate())
    first = right.norm("l2")
    steps = shortened = 0
    while steps < 60 and right.norm("l2") > tolerance * first:
        solver.solve(right.vec(), step.vec())
        before, slope, share = right.norm("l2"), -right.inner(step), 1.0
        u.axpy(-1.0, step)
        system.assemble()
        while -right.inner(step) > -0.5 * slope and right.norm("l2") >= before and share > 1e-6:
            share /= 2
            shortened += 1
            u.axpy(share, step)
            system.assemble()
        steps += 1
    return {"steps": steps, "shortened": shortened, "reached": right.norm("l2") / first}


def mean_ms(runs, work):
    begun = time.perf_counter()
    for _ in range(runs):
        result = work()
    return 1000 * (time.perf_counter() - begun) / runs, result


def answer(values):
    return " ".join(f"{key}={value}" for key, value in values.items())


def main():
    answers = os.fdopen(os.dup(1), "w")
    os.dup2(2, 1)  # what the libraries and their compilers print is no answer
    problem = assembled = None
    for line in sys.stdin:
        verb, *words = line.split()
        try:
            if verb == "load":  # load FILE DEGREE
                problem = Problem(words[0], int(words[1]))
                assembled = None
                reply = {"unknowns": problem.unknowns}
            elif verb == "assemble":  # assemble RUNS HEIGHT
                if assembled is None:
                    problem.set_bump(float(words[1]))
                    assembled = Assembled(problem)
                    assembled.assemble()
                ms, _ = mean_ms(int(words[0]), assembled.assemble)
                reply = {"ms": ms, **assembled.check()}
            elif verb == "newton":  # newton RUNS ORDERING TOLERANCE
                ms, report = mean_ms(int(words[0]), lambda: newton(problem, words[1], float(words[2])))
                reply = {"ms": ms, **report, "energy": assemble(problem.energy)}
            else:
                reply = {"error": f"unknown verb {verb}"}
            text = answer(reply)
        except Exception as error:
            text = "error " + " ".join(str(error).split())
        print(text, file=answers, flush=True)


main()

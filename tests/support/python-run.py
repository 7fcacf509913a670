"""Runs fixture code with numbers, for tests only: requests are lines of JSON on standard input, answers on standard output."""

import ast
import importlib.abc
import importlib.util
import json
import math
import sys
import types

FILE = "<fixture>"


class Constants(ast.NodeTransformer):
    """Literals of declared constants give way to drawn numbers."""

    def __init__(self, names):
        self.names = names

    def known(self, name, value):
        if name not in self.names or not isinstance(value, ast.Constant) or type(value.value) not in (int, float):
            return value
        made = ast.Call(ast.Name("__known", ast.Load()), [ast.Constant(name)], [])
        return ast.copy_location(made, value)

    @staticmethod
    def name_of(target):
        if isinstance(target, ast.Name):
            return target.id
        return target.attr if isinstance(target, ast.Attribute) else ""

    def visit_Assign(self, node):
        self.generic_visit(node)
        if len(node.targets) == 1:
            node.value = self.known(self.name_of(node.targets[0]), node.value)
        return node

    def visit_AnnAssign(self, node):
        self.generic_visit(node)
        if node.value is not None:
            node.value = self.known(self.name_of(node.target), node.value)
        return node

    def visit_Dict(self, node):
        self.generic_visit(node)
        node.values = [self.known(k.value if isinstance(k, ast.Constant) else "", v) for k, v in zip(node.keys, node.values)]
        return node


class Project(importlib.abc.MetaPathFinder, importlib.abc.Loader):
    """Imports from the other files of the fixture folder, held in memory."""

    def __init__(self, files, package):
        self.files = files
        self.package = package

    def find_spec(self, name, path=None, target=None):
        base = "/".join(name.split("."))
        for at in (f"{self.package}/{base}" if self.package else base, base):
            for file in (f"{at}.py", f"{at}/__init__.py"):
                if file in self.files:
                    spec = importlib.util.spec_from_loader(name, self, is_package=file.endswith("__init__.py"))
                    spec.loader_state = file
                    return spec
            if any(f.startswith(f"{at}/") for f in self.files):
                spec = importlib.util.spec_from_loader(name, self, is_package=True)
                spec.loader_state = None
                return spec
        return None

    def exec_module(self, module):
        file = module.__spec__.loader_state
        if file is not None:
            exec(compile(self.files[file], file, "exec"), module.__dict__)


def primed(name):
    return name.replace("'", "") + (f"_{name.count(chr(39))}" if "'" in name else "")


class Ways:
    """The last values of watched local variables."""

    def __init__(self, names):
        self.names = names
        self.seen = {}

    def __call__(self, frame, event, argument):
        if event == "return" and frame.f_code.co_filename == FILE and frame.f_code.co_name != "<module>":
            values = frame.f_locals
            for name in self.names:
                if name in values and (name not in self.seen or frame.f_code.co_name[0] != "<"):
                    self.seen[name] = values[name]


def number(value):
    if hasattr(value, "item"):
        value = value.item()
    if isinstance(value, (list, tuple)) and len(value) == 1:
        return number(value[0])
    value = float(value)
    return value if math.isfinite(value) else None


def load(request, known):
    tree = Constants(set(request["constants"])).visit(ast.parse(request["text"]))
    module = types.ModuleType(request["module"])
    module.__package__ = request["module"].rpartition(".")[0]
    module.__dict__["__known"] = known.__getitem__
    sys.modules[module.__name__] = module
    exec(compile(ast.fix_missing_locations(tree), FILE, "exec"), module.__dict__)
    return module


def answer(request):
    finder = Project(request["others"], request["root"])
    sys.meta_path.insert(0, finder)
    before = set(sys.modules)
    try:
        found = []
        setup = compile("\n".join(request["setup"]), "<run>", "exec")
        call = compile(request["call"].strip(), "<run>", "eval")
        lefts = [compile(left.strip(), "<claim>", "eval") for left in request["lefts"]]
        for values in request["values"]:
            known = dict(zip(request["symbols"], values))
            module = load(request, known)
            scope = dict(module.__dict__)
            scope.update({primed(k): v for k, v in known.items() if k in request["given"]})
            exec(setup, scope)
            starts = [eval(left, scope) if op != "=" else 0 for left, op in zip(lefts, request["ops"])]
            ways = Ways(request["watched"])
            sys.setprofile(ways)
            try:
                scope["return_"] = eval(call, scope)
            finally:
                sys.setprofile(None)
            scope.update(ways.seen)
            row = []
            for left, start, op in zip(lefts, starts, request["ops"]):
                value = eval(left, scope)
                row.append(number(value if op == "=" else value - start))
            found.append(row)
        return {"values": found}
    except BaseException as error:
        return {"error": f"{type(error).__name__}: {error}"}
    finally:
        sys.meta_path.remove(finder)
        for name in set(sys.modules) - before:
            if isinstance(getattr(sys.modules[name].__spec__, "loader", None), Project) or name == request["module"]:
                del sys.modules[name]


def main():
    import warnings

    warnings.simplefilter("ignore")
    out = sys.stdout
    sys.stdout = sys.stderr
    for line in sys.stdin:
        out.write(json.dumps(answer(json.loads(line))) + "\n")
        out.flush()


main()

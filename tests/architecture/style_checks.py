"""Rules about names, lengths, errors and docstrings. One line for each breach."""

import ast
import re

LONGEST_FILE = 350
EMPTY_NAMES = {"utils", "util", "helpers", "helper", "common", "manager", "managers", "misc"}

# Outermost loops, and the place where a failed connection is thrown away; each logs or re-raises.
MAY_CATCH_ALL = {
    "campaigns/ticker.py": 1,
    "campaigns/live/channel.py": 1,
    "campaigns/live/coverage.py": 1,
    "campaigns/live/hub.py": 1,
    "campaigns/live/reading.py": 1,
}
MAY_TOUCH_ENVIRONMENT = {
    "campaigns.project.settings": "the one file that reads it",
    "campaigns.project.set_up": "runs before there are settings",
    "campaigns.project.asgi": "names the settings",
    "campaigns.project.wsgi": "names the settings",
    "campaigns.project.worker": "hands it to its child",
    "campaigns.rehearsal.server_process": "hands it to its child",
}
_CATCH_ALL = {"Exception", "BaseException"}
_ARRAYS = re.compile(r"\b(Floats\w*|Ints\w*|Bools|Flags|NDArray|ArrayLike|ndarray)\b")
_SHAPE = re.compile(r"\(\s*(\w+|\.\.\.)\s*(,|\))")


def long_files(texts):
    """Files beyond the length that a reader can hold. Takes {path: text}."""
    for path, text in texts.items():
        n_lines = len(text.splitlines())
        if n_lines > LONGEST_FILE:
            yield f"{path}: {n_lines} lines, at most {LONGEST_FILE}"


def empty_names(paths):
    """Files and folders whose name says nothing."""
    for path in paths:
        words = set(re.split(r"[/._-]", path.lower()))
        if words & EMPTY_NAMES:
            yield f"{path}: name it for what it does"


def catch_alls(modules):
    """More handlers of every exception than the file is allowed."""
    for module in modules:
        handlers = [
            node
            for node in ast.walk(module.tree)
            if isinstance(node, ast.ExceptHandler) and _catches_all(node)
        ]
        if len(handlers) > MAY_CATCH_ALL.get(module.path, 0):
            lines = ", ".join(str(node.lineno) for node in handlers)
            yield f"{module.path}:{lines}: catches every exception"


def environment_reads(modules):
    """The environment is read by the settings, and by set-up before there are any."""
    for module in modules:
        if not module.name.startswith(tuple(MAY_TOUCH_ENVIRONMENT)):
            for node in ast.walk(module.tree):
                if isinstance(node, ast.Attribute | ast.Name) and _names_environment(node):
                    yield f"{module.path}:{node.lineno}: reads the environment"


def unsectioned_docstrings(modules):
    """Public functions of skytiles whose docstring does not say what goes in and comes out."""
    for module in modules:
        if module.name.startswith("skytiles"):
            for function in _public_functions(module.tree):
                for problem in _docstring_problems(function):
                    yield f"{module.path}:{function.lineno}: {function.name}: {problem}"


def positional_switches(modules):
    """Yes-or-no parameters that a caller may give without their name."""
    for module in modules:
        for node in ast.walk(module.tree):
            if isinstance(node, ast.FunctionDef | ast.AsyncFunctionDef):
                for argument in [*node.args.posonlyargs, *node.args.args]:
                    if getattr(argument.annotation, "id", "") == "bool":
                        yield f"{module.path}:{node.lineno}: {argument.arg} must be keyword-only"


def crowded_signatures(modules):
    """Public functions of skytiles with more than six parameters by position."""
    for module in modules:
        if module.name.startswith("skytiles"):
            for function in _public_functions(module.tree):
                if len(function.args.args) > 6:
                    yield f"{module.path}:{function.lineno}: {function.name}: use names"


def _names_environment(node):
    if isinstance(node, ast.Name):
        return node.id in {"environ", "getenv"}
    return node.attr in {"environ", "getenv"} and getattr(node.value, "id", "") == "os"


def _catches_all(handler):
    kinds = handler.type.elts if isinstance(handler.type, ast.Tuple) else [handler.type]
    return any(kind is None or getattr(kind, "id", "") in _CATCH_ALL for kind in kinds)


def _public_functions(tree):
    for node in tree.body:
        if isinstance(node, ast.FunctionDef) and not node.name.startswith("_"):
            yield node


def _docstring_problems(function):
    doc = ast.get_docstring(function) or ""
    if not doc:
        yield "no docstring"
        return
    parameters = _section(doc, "Parameters")
    for argument in [*function.args.args, *function.args.kwonlyargs]:
        line = _line_of(parameters, argument.arg)
        if line is None:
            yield f"parameter {argument.arg} is not described"
        elif _takes_array(argument.annotation) and not _SHAPE.search(line):
            yield f"parameter {argument.arg} has no shape"
    yield from _return_problems(function, _section(doc, "Returns") or _section(doc, "Yields"))


def _return_problems(function, returns):
    gives_nothing = function.returns is None or ast.unparse(function.returns) == "None"
    if gives_nothing:
        return
    if not returns:
        yield "no section Returns"
    elif _takes_array(function.returns) and not _SHAPE.search(returns):
        yield "what it returns has no shape"


def _takes_array(annotation):
    text = ast.unparse(annotation) if annotation else ""
    # A function or a mapping of arrays is described in words.
    return bool(_ARRAYS.search(text)) and not re.search(r"Callable|dict|Mapping|Sequence", text)


def _section(doc, title):
    match = re.search(rf"^{title}\n-+\n(.*?)(?=^\w+\n-+\n|^Source:|\Z)", doc, re.M | re.S)
    return match.group(1) if match else ""


def _line_of(parameters, name):
    """The first line of a parameter's entry and what follows it, up to the next one."""
    lines = parameters.splitlines()
    for number, line in enumerate(lines):
        names = re.split(r"\s:\s|:\s", line)[0]
        if not line.startswith(" ") and name in re.split(r"[,\s]+", names):
            entry = [line]
            for following in lines[number + 1 :]:
                if not following.startswith(" "):
                    break
                entry.append(following)
            return " ".join(entry)
    return None

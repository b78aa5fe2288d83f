import pickle

from trunnion.files.problems import FileProblems, Problem, did_you_mean


def test_a_problem_names_its_file_its_line_and_its_key() -> None:
    problem = Problem("north.yaml", 17, "mount.first.rate_deg_s", "expected above 0, got -3")
    assert str(problem) == "north.yaml:17: mount.first.rate_deg_s: expected above 0, got -3"


def test_a_problem_without_a_line_or_a_key_leaves_them_out() -> None:
    assert str(Problem("gone.yaml", None, "", "no such file")) == "gone.yaml: no such file"


def test_problems_come_in_the_order_of_the_lines_and_survive_pickling() -> None:
    late, early = Problem("a", 9, "x", "bad"), Problem("a", 2, "y", "worse")
    problems = FileProblems([late, early])
    assert problems.problems == (early, late)
    assert str(problems) == "a:2: y: worse\na:9: x: bad"
    assert pickle.loads(pickle.dumps(problems)).problems == (early, late)


def test_a_misspelt_word_gets_the_nearest_known_one() -> None:
    assert did_you_mean("Elevation_flor", ["elevation_floor_deg", "stow"]).endswith(
        "did you mean 'elevation_floor_deg'?"
    )
    assert did_you_mean("zzz", ["elevation_floor_deg"]) == ""

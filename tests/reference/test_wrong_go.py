"""No wrong go among random cases; the benchmark hunts longer."""

from wrong_go import hunt, hunt_launches


def test_no_steady_go_fails_in_more_than_five_of_a_hundred_draws():
    found = hunt(300)
    print(f"{found.tried} tried, {found.go} go, worst share of failing draws {100 * found.worst:.2f} %")
    assert found.wrong == []
    assert found.go >= 60


def test_no_launch_that_is_a_go_fails_in_more_than_five_of_a_hundred_draws():
    found = hunt_launches(60)
    print(f"{found.tried} tried, {found.go} go, worst share of failing draws {100 * found.worst:.2f} %")
    assert found.wrong == []
    assert found.go >= 12

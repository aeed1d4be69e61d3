"""No wrong go among random cases; the benchmark hunts longer."""

from wrong_go import hunt


def test_no_go_fails_in_more_than_five_of_a_hundred_draws():
    found = hunt(300)
    print(f"{found.tried} tried, {found.go} go, worst share of failing draws {100 * found.worst:.2f} %")
    assert found.wrong == []
    assert found.go >= 60

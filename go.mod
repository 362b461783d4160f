module lanternbook

go 1.26.0

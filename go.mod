module barlitre

go 1.24.0

require (
	github.com/jung-kurt/gofpdf v1.16.2
	golang.org/x/image v0.30.0
	gonum.org/v1/gonum v0.17.0
)

require (
	golang.org/x/text v0.28.0 // indirect
	gopkg.in/yaml.v3 v3.0.1 // indirect
)

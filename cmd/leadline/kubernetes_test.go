//go:build unix

package main

import (
	"encoding/json"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"reflect"
	"regexp"
	"strings"
	"testing"
)

// TestKubernetesManifest reads the example as YAML, with a reader of YAML that
// is not ours, and holds it against the program and itself.
func TestKubernetesManifest(t *testing.T) {
	const read = `import json, sys, yaml; json.dump(list(yaml.safe_load_all(sys.stdin)), sys.stdout)`
	if out, err := exec.Command("python3", "-c", "import yaml").CombinedOutput(); err != nil {
		t.Skipf("python3 cannot read YAML (Debian package python3-yaml): %s", out)
	}
	manifest, err := os.Open(filepath.Join(farm, "kubernetes.yaml"))
	if err != nil {
		t.Fatal(err)
	}
	defer manifest.Close()
	cmd := exec.Command("python3", "-c", read)
	cmd.Stdin = manifest
	out, err := cmd.Output()
	if err != nil {
		t.Fatalf("not YAML: %v\n%s", err, err.(*exec.ExitError).Stderr)
	}
	var jobs []kubernetesJob
	if err := json.Unmarshal(out, &jobs); err != nil || len(jobs) != 2 {
		t.Fatalf("%d documents: %v", len(jobs), err)
	}
	for i, want := range [][]int{{exitUsage, exitFrame, exitMismatch}, {exitUsage, exitFrame, exitMismatch, exitUndone}} {
		j := jobs[i]
		if j.APIVersion != "batch/v1" || j.Kind != "Job" || j.Spec.Template.Spec.RestartPolicy != "Never" {
			t.Errorf("document %d is %s %s, restarting %s", i, j.APIVersion, j.Kind, j.Spec.Template.Spec.RestartPolicy)
		}
		rule := j.Spec.PodFailurePolicy.Rules[0]
		if rule.Action != "FailJob" || !reflect.DeepEqual(rule.OnExitCodes.Values, want) {
			t.Errorf("document %d gives up on %v, not %v", i, rule.OnExitCodes.Values, want)
		}
		if name := j.Spec.Template.Spec.Containers[0].Name; name != rule.OnExitCodes.ContainerName {
			t.Errorf("document %d has a container %s and rules for %s", i, name, rule.OnExitCodes.ContainerName)
		}
	}
	task := jobs[0].Spec
	c := task.Template.Spec.Containers[0]
	if task.CompletionMode != "Indexed" || len(c.Env) != 1 || c.Env[0].Name != "PARTS" || c.Env[0].Value != fmt.Sprint(task.Completions) {
		t.Errorf("%s, %d completions, environment %v", task.CompletionMode, task.Completions, c.Env)
	}
	runLine(t, c.Args[0])
}

// kubernetesJob is the part of a Job (Kubernetes API reference, batch/v1) that
// the test looks at.
type kubernetesJob struct {
	APIVersion string `json:"apiVersion"`
	Kind       string `json:"kind"`
	Spec       struct {
		CompletionMode   string `json:"completionMode"`
		Completions      int    `json:"completions"`
		PodFailurePolicy struct {
			Rules []struct {
				Action      string `json:"action"`
				OnExitCodes struct {
					ContainerName string `json:"containerName"`
					Values        []int  `json:"values"`
				} `json:"onExitCodes"`
			} `json:"rules"`
		} `json:"podFailurePolicy"`
		Template struct {
			Spec struct {
				RestartPolicy string `json:"restartPolicy"`
				Containers    []struct {
					Name string   `json:"name"`
					Args []string `json:"args"`
					Env  []struct {
						Name, Value string
					} `json:"env"`
				} `json:"containers"`
			} `json:"spec"`
		} `json:"template"`
	} `json:"spec"`
}

// runLine runs the container's line as the shell of a pod with index 1 would,
// in a folder of the test's.
func runLine(t *testing.T, line string) {
	t.Helper()
	dir := t.TempDir()
	line = strings.ReplaceAll(line, "/frame/tide.frame.json", testdata(t, "small.frame.json"))
	line = regexp.MustCompile(`/prints/\S+`).ReplaceAllString(line, "tide.parts")
	cmd := exec.Command("/bin/sh", "-c", line)
	cmd.Dir = dir
	cmd.Env = append(os.Environ(), "PATH="+filepath.Dir(executable(t))+":"+os.Getenv("PATH"), "JOB_COMPLETION_INDEX=1", "PARTS=40")
	if out, err := cmd.CombinedOutput(); err != nil {
		t.Fatalf("%v: %s", err, out)
	}
	if files := contents(t, filepath.Join(dir, "tide.parts")); files["part-0002-of-0040"] == "" {
		t.Errorf("index 1 made %v", keys(files))
	}
}

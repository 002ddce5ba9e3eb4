# Completion of probewright for bash: source this file, or put it into /usr/share/bash-completion/completions/probewright.

_probewright() {
  local word=${COMP_WORDS[COMP_CWORD]} before=${COMP_WORDS[COMP_CWORD-1]} command= second= i
  local common="--config --station --help"
  COMPREPLY=()
  for ((i = 1; i < COMP_CWORD; i++)); do
    case ${COMP_WORDS[i]} in
      demo | line | bench | test | checkup | trace | ledger | limits | simulate | measure) command=${COMP_WORDS[i]} second=${COMP_WORDS[i+1]} && break ;;
    esac
  done
  case $before in
    --config | --ports | --attach | --control | --truth | --ledger | --model | --sheet | --out) mapfile -t COMPREPLY < <(compgen -f -- "$word"); return ;;
    --purpose) mapfile -t COMPREPLY < <(compgen -W "production engineering reference challenge gauge echo training return" -- "$word"); return ;;
    --faults) mapfile -t COMPREPLY < <(compgen -W "none lot 0.02" -- "$word"); return ;;
    --band) mapfile -t COMPREPLY < <(compgen -W "red infrared" -- "$word"); return ;;
    --frequency) mapfile -t COMPREPLY < <(compgen -W "known free" -- "$word"); return ;;
  esac
  local words=
  case $command in
    "") words="demo line bench test checkup trace ledger limits simulate measure --version $common" ;;
    demo) words="--headless --probes --nests --speed --seed --mistakes --out --json $common" ;;
    line) words="--text --ledger --ports --speed --hands --control $common" ;;
    bench) words="--nests --speed --seed --perfect --ambient-C --mains-Hz --ports --attach --control --truth --seat $common" ;;
    test) words="--nest --purpose --operator --ledger --ports --speed --hands --no-hands --control --json $common" ;;
    checkup) words="--ledger --ports --speed --json $common" ;;
    trace) words="--ledger --json $common" ;;
    ledger)
      words="verify seal $common"
      [ "$second" = verify ] && words="--seal --entry --json $common"
      [ "$second" = seal ] && words="--json $common"
      ;;
    limits)
      words="check diff $common"
      [ "$second" = check ] && words="--model --json $common"
      [ "$second" = diff ] && words="--json $common"
      ;;
    simulate) words="--probes --stations --seed --sheet --model --retest --faults --threads --json $common" ;;
    measure)
      words="spectrum pulses $common"
      [ "$second" = spectrum ] && words="--band --threshold --temperature-C --slit-nm --json $common"
      [ "$second" = pulses ] && words="--rate-Hz --cycle-s --frequency --json $common"
      ;;
  esac
  mapfile -t COMPREPLY < <(compgen -W "$words" -- "$word")
  [[ $word == -* || -z $command ]] || mapfile -t -O "${#COMPREPLY[@]}" COMPREPLY < <(compgen -f -- "$word")
}
complete -F _probewright probewright

# SPDX-License-Identifier: BSD-2-Clause
#
# Completion of idspan command lines for bash.

_idspan()
{
    local word=${COMP_WORDS[COMP_CWORD]}
    local previous=${COMP_WORDS[COMP_CWORD - 1]}
    local tasks="show types basis count rank follows fresh check draw matrix"
    local common="--format --output --memory --threads --help --version"
    local task="" own="" i

    # --option=value comes as three words.
    if [[ $previous == "=" ]]; then
        previous=${COMP_WORDS[COMP_CWORD - 2]}
    elif [[ $word == "=" ]]; then
        word=""
    fi
    COMPREPLY=()
    case $previous in
    --format)
        mapfile -t COMPREPLY < <(compgen -W "text csv json latex svg html ascii tikz mtx" -- "$word")
        return
        ;;
    --run)
        mapfile -t COMPREPLY < <(compgen -d -- "$word")
        return
        ;;
    --output | --proof | --witness | --algebra | --save)
        mapfile -t COMPREPLY < <(compgen -f -- "$word")
        return
        ;;
    --memory)
        mapfile -t COMPREPLY < <(compgen -W "1G 2G 4G 8G 16G none" -- "$word")
        return
        ;;
    --by)
        mapfile -t COMPREPLY < <(compgen -W "partition" -- "$word")
        return
        ;;
    --candidate | --model | --degree | --degrees | --partition | --from | --count | --index | --primes | --seed | --field | --threads | --jobs | --cell | --dimension | --entries | --steps)
        return
        ;;
    esac

    for ((i = 1; i < COMP_CWORD; i++)); do
        case ${COMP_WORDS[i]} in
        show | types | basis | count | rank | follows | fresh | check | draw | matrix)
            task=${COMP_WORDS[i]}
            break
            ;;
        esac
    done
    case $task in
    types) own="--degree --degrees" ;;
    basis) own="--degree --from --count" ;;
    count) own="--degree --degrees --split" ;;
    follows) own="--candidate --all --proof --witness --algebra --dimension --entries --steps --primes --seed" ;;
    fresh) own="--model --degree --degrees --table --save --exact --primes --seed" ;;
    draw) own="--degree --monomials --index --from --count" ;;
    matrix) own="--degree --plain --field --seed" ;;
    rank)
        own="--degree --degrees --by --partition --cross-check --exact --primes --seed --field"
        own+=" --run --jobs --plan --list-cells --cell"
        ;;
    esac

    if [[ $word == -* ]]; then
        mapfile -t COMPREPLY < <(compgen -W "$own $common" -- "$word")
    elif [[ -z $task ]]; then
        mapfile -t COMPREPLY < <(compgen -W "$tasks" -- "$word")
    else
        compopt -o filenames 2>/dev/null
        mapfile -t COMPREPLY < <(
            if [[ $task == check ]]; then
                compgen -f -- "$word"
            else
                compgen -f -X '!*.pres' -- "$word"
            fi
            compgen -d -- "$word"
        )
    fi
}

complete -F _idspan idspan
